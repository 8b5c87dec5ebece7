import type { Iso } from './api.js';

/** When a person wants to hear of something. */
export const MAIL_CHOICES = ['at_once', 'daily', 'never'] as const;
export type MailChoice = (typeof MAIL_CHOICES)[number];

/** What a person may choose to hear of, with what holds until they choose. Mail about the account itself is always sent, at once. */
export const CHOOSABLE_MAIL = {
  review_request: 'at_once',
  mention: 'at_once',
  decision: 'daily',
  batch_finished: 'at_once',
  membership: 'at_once',
  programme: 'at_once',
} as const satisfies Record<string, MailChoice>;
export type ChoosableMail = keyof typeof CHOOSABLE_MAIL;
export const CHOOSABLE_MAIL_KINDS = Object.keys(CHOOSABLE_MAIL) as ChoosableMail[];

export type MailChoices = Record<ChoosableMail, MailChoice>;

/** A message that the mail server of the demonstration took in. */
export interface ReceivedMailSummary {
  id: string;
  receivedAt: Iso;
  to: string[];
  subject: string;
}
export interface ReceivedMail extends ReceivedMailSummary {
  from: string;
  text: string;
  html: string;
}
