import { createHmac, randomBytes } from 'node:crypto';
import bcrypt from 'bcryptjs';

/**
 * bcrypt reads the first 72 bytes only, so a password goes through a keyed hash first: any length counts to its last character, and the
 * stored hashes alone, without the key, cannot be guessed at. Unicode is normalised, so that the same keys give the same password everywhere.
 */
const preHash = (password: string, key: string): string => createHmac('sha256', key).update(password.normalize('NFKC')).digest('base64');

export interface HashSettings {
  readonly passwordKey: string;
  readonly passwordCost: number;
}

export const hashPassword = (password: string, { passwordKey, passwordCost }: HashSettings): Promise<string> =>
  bcrypt.hash(preHash(password, passwordKey), passwordCost);

export const matchesPassword = (password: string, hash: string, { passwordKey }: HashSettings): Promise<boolean> =>
  bcrypt.compare(preHash(password, passwordKey), hash);

/** Whether a hash was made with less work than is asked for today. */
export const isOutdated = (hash: string, { passwordCost }: HashSettings): boolean => bcrypt.getRounds(hash) < passwordCost;

/** A hash that no password matches, to spend the same time on accounts that do not exist. */
export const unmatchable = (settings: HashSettings): Promise<string> => hashPassword(randomBytes(32).toString('hex'), settings);
