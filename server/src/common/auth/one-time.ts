import { createHash, createHmac, timingSafeEqual } from 'node:crypto';
import type { Config } from '../../config/config.js';

/** What a link in a mail is good for. */
export type LinkPurpose = 'invitation' | 'password_reset' | 'email_change';

const PAGES: Record<LinkPurpose, string> = { invitation: '/join', password_reset: '/reset-password', email_change: '/confirm-email' };

type Keyed = Pick<Config, 'jwtSecret'>;

const keyed = ({ jwtSecret }: Keyed, text: string): string =>
  createHmac('sha256', jwtSecret).update(`foreveil mail\n${text}`).digest('base64url');

/**
 * The secret of a link, 256 bit, from the id of its row and the server's key: so it stands nowhere, neither in the row, which keeps its hash
 * only, nor in the outbox, and the worker that writes the mail can still make it.
 */
export const linkSecret = (config: Keyed, purpose: LinkPurpose, id: string): string => keyed(config, `${purpose}\n${id}`);

/** What of a secret is stored. Secrets of 256 bit need no slow hash. */
export const hashSecret = (secret: string): string => createHash('sha256').update(secret).digest('hex');

/** The address for the mail. The secret stands behind #, which a browser sends to no server, so it reaches no log and no other site. */
export const linkAddress = (config: Keyed & Pick<Config, 'linkOrigin'>, purpose: LinkPurpose, id: string): string =>
  `${config.linkOrigin}${PAGES[purpose]}#${linkSecret(config, purpose, id)}`;

/** Lets whoever holds it turn off one kind of mail of one person, and nothing else. */
export const stopMailToken = (config: Keyed, userId: string, kind: string): string =>
  `${userId}.${kind}.${keyed(config, `stop\n${userId}\n${kind}`)}`;

/** @returns whose mail of which kind the token turns off; null when it was not made by this server */
export function readStopMailToken(config: Keyed, token: string): { userId: string; kind: string } | null {
  const [userId, kind] = token.split('.');
  if (!userId || !kind) return null;
  const [given, right] = [Buffer.from(token), Buffer.from(stopMailToken(config, userId, kind))];
  return given.length === right.length && timingSafeEqual(given, right) ? { userId, kind } : null;
}
