import { HttpException } from '@nestjs/common';
import type { ErrorCode } from '@foreveil/shared';
import { MulterError } from 'multer';
import { DomainError } from './domain-error.js';

/** What the frameworks below us throw, as one of our refusals; null for what nobody expected. */
export function toDomainError(error: unknown): DomainError | null {
  if (error instanceof DomainError) return error;
  if (error instanceof MulterError) return fromMulter(error);
  if (isUnavailable(error))
    return new DomainError('unavailable', 'The database does not answer. Try again in a moment.', { retryAfter: 2 });
  if (isUnstorable(error)) return new DomainError('invalid_request', 'The text holds characters that cannot be stored.');
  const status = statusOf(error);
  if (status === null || status >= 500) return null;
  const code = CODE_OF_STATUS[status] ?? 'invalid_request';
  return new DomainError(code, SENTENCES[code] ?? 'The request cannot be understood.', status === 414 ? { status } : {});
}

const CODE_OF_STATUS: Record<number, ErrorCode> = { 401: 'not_signed_in', 404: 'not_found', 405: 'method_not_allowed', 413: 'too_large' };

const SENTENCES: Partial<Record<ErrorCode, string>> = {
  not_signed_in: 'Sign in to do this.',
  not_found: 'There is nothing at this address.',
  too_large: 'The request is larger than this server accepts.',
  invalid_request: 'The request is not well formed.',
};

function fromMulter(error: MulterError): DomainError {
  if (error.code === 'LIMIT_FILE_SIZE') return new DomainError('too_large', 'The file is larger than this server accepts.');
  return new DomainError('invalid_request', 'The upload must be one file in the part "file" and one JSON text in the part "meta".');
}

/** NUL, or half of a surrogate pair, in text on its way into the database. */
const isUnstorable = (error: unknown): boolean => ['22021', '22P05'].includes((error as { code?: string } | null)?.code ?? '');

/** Nest's own exceptions and those of the body parsers both say which status they mean. */
function statusOf(error: unknown): number | null {
  if (error instanceof HttpException) return error.getStatus();
  const { status, message } = (error ?? {}) as { status?: unknown; message?: unknown };
  if (typeof status === 'number') return status;
  // busboy, below multer, throws plain errors for a body that is no multipart
  return typeof message === 'string' && /^(Multipart:|Unexpected end of form|Malformed part header)/.test(message) ? 400 : null;
}

/** Connection refused or cut, server shutting down, statement timed out, lock not available, or no connection free in the pool. */
const UNAVAILABLE = new Set([
  'ECONNREFUSED',
  'ECONNRESET',
  'EPIPE',
  '57P01',
  '57P02',
  '57P03',
  '57014',
  '55P03',
  '53300',
  '08006',
  '08001',
  '25P03',
]);

function isUnavailable(error: unknown): boolean {
  const { code, name, message } = (error ?? {}) as { code?: unknown; name?: unknown; message?: unknown };
  if (typeof code === 'string' && UNAVAILABLE.has(code)) return true;
  if (name === 'KnexTimeoutError') return true;
  return typeof message === 'string' && /^(Connection terminated|timeout exceeded when trying to connect|timeout expired)/.test(message);
}
