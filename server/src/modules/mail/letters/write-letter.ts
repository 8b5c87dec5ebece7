import type { Config } from '../../../config/config.js';
import { linkAddress } from '../../../common/auth/one-time.js';
import type { MailFacts, MailKind, Notice, SecurityChange } from '../facts.js';
import { isChoosable } from '../queue-mail.js';
import type { Letter } from './letter.js';

type Writers = { readonly [K in MailKind]: (facts: MailFacts[K], config: Config) => Letter };

const utc = (iso: string): string => `${iso.slice(0, 16).replace('T', ' ')} UTC`;
const UNASKED = 'If you did not ask for this, do nothing: without the link nothing happens.';

/** @returns the letter of an outbox row */
export function writeLetter<K extends MailKind>(kind: K, facts: MailFacts[K], config: Config): Letter {
  return WRITERS[kind](facts, config);
}

const notice = ({ programmeName, about, sentence, remark, path }: Notice, { linkOrigin }: Config): Letter => ({
  subject: `${about} (${programmeName})`,
  paragraphs: [sentence],
  ...(remark ? { quote: remark } : {}),
  link: { label: 'Open in Foreveil', address: `${linkOrigin}${path}` },
  small: [`You get this as a member of ${programmeName}.`],
});

const WRITERS: Writers = {
  review_request: notice,
  mention: notice,
  decision: notice,
  batch_finished: notice,
  membership: notice,
  programme: notice,
  invitation: ({ linkId, by, programmeName, role, expiresAt }, config) => ({
    subject: programmeName ? `${by} invites you to ${programmeName}` : `${by} invites you to Foreveil`,
    paragraphs: [
      programmeName
        ? `${by} invites you to identify spectral lines together in the programme ${programmeName}${role ? `, as ${role}` : ''}.`
        : `${by} invites you to open an account in Foreveil, where observing teams identify spectral lines together.`,
      `The link works once, until ${utc(expiresAt)}.`,
    ],
    link: { label: 'Accept the invitation', address: linkAddress(config, 'invitation', linkId) },
    small: ['If you do not know why you were invited, do nothing: no account is made without the link.'],
  }),
  password_reset: ({ linkId, expiresAt }, config) => ({
    subject: 'Set a new password',
    paragraphs: [`Somebody, hopefully you, asked for a new password of your account. The link works once, until ${utc(expiresAt)}.`],
    link: { label: 'Set a new password', address: linkAddress(config, 'password_reset', linkId) },
    small: [UNASKED, 'Setting a new password ends every session of your account.'],
  }),
  email_confirm: ({ linkId, name, expiresAt }, config) => ({
    subject: 'Confirm your new e-mail address',
    paragraphs: [`${name} wants to use this address for an account in Foreveil. The link works once, until ${utc(expiresAt)}.`],
    link: { label: 'Use this address', address: linkAddress(config, 'email_change', linkId) },
    small: [UNASKED],
  }),
  security: ({ what, at, detail }, { linkOrigin }) => ({
    subject: SECURITY[what].subject,
    paragraphs: [`${SECURITY[what].sentence}${detail ? ` ${detail}` : ''}`, `When: ${utc(at)}.`],
    link: { label: 'Look at your account', address: `${linkOrigin}/account` },
    small: ['If this was not you, set a new password at once; that ends every session of your account.'],
  }),
};

const SECURITY: Record<SecurityChange, { subject: string; sentence: string }> = {
  password_changed: {
    subject: 'Your password was changed',
    sentence: 'The password of your account was changed; its other sessions were ended.',
  },
  password_reset: {
    subject: 'Your password was set anew',
    sentence: 'A new password was set through a link sent to this address; all sessions were ended.',
  },
  email_changed: { subject: 'Your e-mail address was changed', sentence: 'The e-mail address of your account was changed.' },
  email_change_asked: {
    subject: 'A new e-mail address was asked for',
    sentence: 'Somebody signed in to your account wants to change its e-mail address. It changes when the new address is confirmed.',
  },
  second_factor_on: {
    subject: 'Second factor turned on',
    sentence: 'Signing in to your account now needs a code of your authenticator app.',
  },
  second_factor_off: { subject: 'Second factor turned off', sentence: 'Signing in to your account needs the password only.' },
  recovery_codes_renewed: {
    subject: 'New recovery codes',
    sentence: 'New recovery codes were made for your account; the old ones no longer work.',
  },
  recovery_code_used: {
    subject: 'A recovery code was used',
    sentence: 'Somebody signed in to your account with one of its recovery codes.',
  },
  token_made: { subject: 'An access token was made', sentence: 'A personal access token was made for your account.' },
  session_replayed: {
    subject: 'A session was ended for safety',
    sentence: 'A session of your account was used from two places at once, as with a stolen cookie. It was ended everywhere.',
  },
  administrator_made: { subject: 'You are an administrator now', sentence: 'Your account may now manage the accounts of this site.' },
  administrator_unmade: {
    subject: 'You are no administrator any more',
    sentence: 'Your account no longer manages the accounts of this site.',
  },
  account_opened_again: { subject: 'Your account is open again', sentence: 'An administrator opened your account again. You can sign in.' },
};

/** Many notices as one letter. */
export function writeDigest(rows: readonly { kind: MailKind; facts: MailFacts[MailKind] }[], config: Config): Letter {
  const notices = rows.filter(({ kind }) => isChoosable(kind)).map(({ facts }) => facts as Notice);
  const programmes = [...new Set(notices.map(({ programmeName }) => programmeName))].sort();
  return {
    subject: `${notices.length} ${notices.length === 1 ? 'thing' : 'things'} in ${programmes.length === 1 ? programmes[0] : `${programmes.length} programmes`}`,
    paragraphs: programmes.flatMap((name) => [
      `${name}:`,
      ...notices
        .filter(({ programmeName }) => programmeName === name)
        .map(({ sentence, remark, path }) => `• ${sentence}${remark ? ` “${remark}”` : ''} ${config.linkOrigin}${path}`),
    ]),
    link: { label: 'Open Foreveil', address: config.linkOrigin },
    small: ['You chose to be told of these once a day.'],
  };
}
