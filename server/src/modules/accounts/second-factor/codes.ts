import { randomInt } from 'node:crypto';
import { Secret, TOTP } from 'otpauth';

const PERIOD_SECONDS = 30;
const LETTERS = '23456789abcdefghjkmnpqrstuvwxyz'; // nothing that is read as something else
const RECOVERY_CODES = 10;

const totpOf = (secret: string, label = '') =>
  new TOTP({ issuer: 'Foreveil', label, secret: Secret.fromBase32(secret), period: PERIOD_SECONDS, digits: 6 });

export const newSecret = (): string => new Secret({ size: 20 }).base32;
export const uriOf = (secret: string, email: string): string => totpOf(secret, email).toString();

/** The step of time that a code belongs to, one early or late included; null when it belongs to none. RFC 6238. */
export function stepOf(code: string, secret: string, nowMs: number): number | null {
  const token = code.replace(/\s/g, '');
  if (!/^\d{6}$/.test(token)) return null;
  const delta = totpOf(secret).validate({ token, timestamp: nowMs, window: 1 });
  return delta === null ? null : Math.floor(nowMs / 1000 / PERIOD_SECONDS) + delta;
}

/** Codes for the day on which the phone is gone: 50 bit each, in two groups. */
export const newRecoveryCodes = (): string[] =>
  Array.from({ length: RECOVERY_CODES }, () => {
    const letters = Array.from({ length: 10 }, () => LETTERS[randomInt(LETTERS.length)]).join('');
    return `${letters.slice(0, 5)}-${letters.slice(5)}`;
  });

export const plainRecoveryCode = (code: string): string => code.toLowerCase().replace(/[^a-z0-9]/g, '');
