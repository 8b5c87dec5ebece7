import { createCipheriv, createDecipheriv, createHmac, randomBytes } from 'node:crypto';
import type { Config } from '../../../config/config.js';

const keyOf = ({ passwordKey }: Pick<Config, 'passwordKey'>): Buffer => createHmac('sha256', passwordKey).update('second factor').digest();

/** Seals a secret that has to be read again: without the server's key, a copy of the database makes no codes. */
export function seal(config: Pick<Config, 'passwordKey'>, text: string): string {
  const nonce = randomBytes(12);
  const cipher = createCipheriv('aes-256-gcm', keyOf(config), nonce);
  const sealed = Buffer.concat([cipher.update(text, 'utf8'), cipher.final()]);
  return Buffer.concat([nonce, cipher.getAuthTag(), sealed]).toString('base64url');
}

/** @throws when the key is another one or the text was changed */
export function unseal(config: Pick<Config, 'passwordKey'>, sealed: string): string {
  const bytes = Buffer.from(sealed, 'base64url');
  const decipher = createDecipheriv('aes-256-gcm', keyOf(config), bytes.subarray(0, 12));
  decipher.setAuthTag(bytes.subarray(12, 28));
  return Buffer.concat([decipher.update(bytes.subarray(28)), decipher.final()]).toString('utf8');
}
