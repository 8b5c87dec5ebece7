import { randomBytes } from 'node:crypto';
import { mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { dirname } from 'node:path';

export interface Secrets {
  readonly jwtSecret: string;
  readonly passwordKey: string;
}

/** Secrets of a demo or test checkout: made on first use, then kept in a file that only its owner can read. */
export function localSecrets(file: string): Secrets {
  const fresh: Secrets = { jwtSecret: randomBytes(48).toString('base64'), passwordKey: randomBytes(48).toString('base64') };
  mkdirSync(dirname(file), { recursive: true });
  try {
    writeFileSync(file, `${JSON.stringify(fresh, null, 2)}\n`, { mode: 0o600, flag: 'wx' });
    return fresh;
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code !== 'EEXIST') throw error;
    return JSON.parse(readFileSync(file, 'utf8')) as Secrets;
  }
}
