import type { ChoosableMail, MemberRole } from '@foreveil/shared';

/** Something in a programme that a person may want to know. Plain text throughout; the letter escapes it. */
export interface Notice {
  readonly programmeName: string;
  /** what it is about, for the subject line: 'Ca II 393.4 nm in Tern 1' */
  readonly about: string;
  /** one complete sentence: who did what */
  readonly sentence: string;
  /** words of a person, quoted */
  readonly remark?: string;
  /** where to look: '/programmes/…' */
  readonly path: string;
}

export type SecurityChange =
  | 'password_changed'
  | 'password_reset'
  | 'email_changed'
  | 'email_change_asked'
  | 'second_factor_on'
  | 'second_factor_off'
  | 'recovery_codes_renewed'
  | 'recovery_code_used'
  | 'token_made'
  | 'session_replayed'
  | 'administrator_made'
  | 'administrator_unmade'
  | 'account_opened_again';

/** What a letter of each kind is made of. Ids of links, never their secrets. */
export interface MailFacts extends Record<ChoosableMail, Notice> {
  readonly invitation: { linkId: string; by: string; programmeName: string | null; role: MemberRole | null; expiresAt: string };
  readonly password_reset: { linkId: string; expiresAt: string };
  readonly email_confirm: { linkId: string; name: string; expiresAt: string };
  readonly security: { what: SecurityChange; at: string; detail?: string };
}
export type MailKind = keyof MailFacts;
