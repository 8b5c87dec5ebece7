import { existsSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import type { ListStatements, ParsedLines } from '@foreveil/shared';
import { DomainError } from '../../common/errors/domain-error.js';
import { inThread } from '../../common/in-thread.js';
import type { Config } from '../../config/config.js';

/** Threads load plain JavaScript: beside this file in dist, or dist's copy when this file itself runs as TypeScript source (tests). */
const beside = fileURLToPath(new URL('./parse-lines.thread.js', import.meta.url));
const built = fileURLToPath(new URL('../../../dist/modules/linelists/parse-lines.thread.js', import.meta.url));
const THREAD = existsSync(beside) ? beside : built;

/** @throws invalid_request when the file is no text, or takes more time or memory than a list may */
export async function parseInThread(bytes: Buffer, statements: ListStatements, config: Config): Promise<ParsedLines> {
  const result = await inThread<ParsedLines>(
    THREAD,
    { text: textOf(bytes), statements },
    { seconds: config.readSeconds, memoryMb: config.readMemoryMb },
  );
  if ('answer' in result) return result.answer;
  throw unusable('The list took more time or memory than allowed and was not read. Split it into smaller lists.');
}

/** UTF-8, and Latin-1 where it is not: both are in use, and no list is lost to an accent in a name. */
function textOf(bytes: Buffer): string {
  if (bytes.includes(0)) throw unusable('The file is no text. Save the list as CSV or as a VOTable.');
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(bytes);
  } catch {
    return bytes.toString('latin1');
  }
}

const unusable = (detail: string) => new DomainError('invalid_request', detail, { errors: [{ pointer: '/file', detail }] });
