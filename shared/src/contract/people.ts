import type { Iso } from './api.js';
import type { MemberRole } from './roles.js';

/** The signed-in person's own account. */
export interface Account {
  id: string;
  email: string;
  name: string;
  administrator: boolean;
  secondFactor: { on: boolean; recoveryCodesLeft: number };
}
export interface Session {
  id: string;
  /** what the browser said of itself */
  device: string;
  createdAt: Iso;
  lastSeenAt: Iso;
  /** the one that asks */
  current: boolean;
}

/** What a personal access token lets a script do: only look, or everything its person may do in programmes. Never the account itself. */
export const TOKEN_SCOPES = ['read', 'write'] as const;
export type TokenScope = (typeof TOKEN_SCOPES)[number];
export interface AccessToken {
  id: string;
  name: string;
  scope: TokenScope;
  createdAt: Iso;
  expiresAt: Iso;
  lastUsedAt: Iso | null;
}
export interface NewAccessToken {
  name: string;
  scope: TokenScope;
  /** 1 to 366 */
  days: number;
}
/** The only answer that ever holds the token itself. */
export interface MadeAccessToken extends AccessToken {
  token: string;
}

/** For an authenticator app: what it needs as text and as the address that a QR code holds. */
export interface SecondFactorOffer {
  secret: string;
  uri: string;
}
export interface RecoveryCodes {
  codes: string[];
}

/** A member as the page of members shows them; the address is there for leads only. */
export interface MemberDetail {
  userId: string;
  name: string;
  role: MemberRole;
  version: number;
  since: Iso;
  /** their account is closed: they cannot sign in */
  closed: boolean;
  email: string | null;
}
export interface Invitation {
  id: string;
  email: string;
  role: MemberRole | null;
  invitedBy: string;
  createdAt: Iso;
  expiresAt: Iso;
  expired: boolean;
}
export interface NewInvitation {
  email: string;
  role: MemberRole;
}
/** What an invitation's link shows before it is accepted. */
export interface InvitationLook {
  email: string;
  programmeId: string | null;
  programmeName: string | null;
  role: MemberRole | null;
  invitedBy: string;
  expiresAt: Iso;
  /** an account with this address exists: sign in to accept */
  hasAccount: boolean;
}

/** An account as administrators see it: nothing of its programmes but how many there are. */
export interface AccountRow {
  id: string;
  email: string;
  name: string;
  active: boolean;
  administrator: boolean;
  secondFactor: boolean;
  createdAt: Iso;
  lastSeenAt: Iso | null;
  programmes: number;
}
export interface AccountPage {
  rows: AccountRow[];
  /** ask for the rows after this address; null: there are no more */
  next: string | null;
}
export interface MailState {
  waiting: number;
  unconfirmed: number;
  failed: number;
}

/** A programme that was deleted and can still be had back. */
export interface StagedProgramme {
  id: string;
  name: string;
  version: number;
  deletedAt: Iso;
  deletedBy: string;
  /** when it goes for good */
  goneAt: Iso;
}
export const PURGE_AFTER_DAYS = 30;

/** Passwords are long; nothing else is asked of them but that they are not plainly guessable. Counted in code points. */
export const PASSWORD_LENGTH = { least: 15, most: 256 };

const WALKS = [
  'abcdefghijklmnopqrstuvwxyz',
  'qwertyuiopasdfghjklzxcvbnm',
  '01234567890123456789012345678901234567890',
  'qwertzuiopasdfghjklyxcvbnm',
];

/** What is wrong with a password, as a sentence; null when it is fine. @param own name and address, which everybody knows */
export function passwordFault(password: string, own: readonly string[]): string | null {
  const points = [...password];
  if (points.length < PASSWORD_LENGTH.least)
    return `The password needs at least ${PASSWORD_LENGTH.least} characters; a sentence works well.`;
  if (points.length > PASSWORD_LENGTH.most) return `The password may have at most ${PASSWORD_LENGTH.most} characters.`;
  if (new Set(points).size < 6) return 'The password repeats too few characters.';
  const plain = password.toLowerCase().normalize('NFKC');
  const known = [...own.flatMap((text) => [text, ...text.split(/[@\s]/)]), 'foreveil', 'password', 'passwort'].map((text) =>
    text.toLowerCase(),
  );
  const rest = known.filter((text) => text.length >= 4).reduce((left, text) => left.replaceAll(text, ''), plain);
  if ([...rest.replace(/[\d\W_]+$/u, '')].length < 6)
    return 'The password is little more than a name or a word that others would try first.';
  if (WALKS.some((walk) => walk.includes(plain) || [...walk].reverse().join('').includes(plain)))
    return 'The password is a walk along the keyboard.';
  return null;
}
