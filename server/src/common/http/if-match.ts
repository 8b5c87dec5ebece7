import { createParamDecorator, type ExecutionContext } from '@nestjs/common';
import type { Request } from 'express';
import { DomainError } from '../errors/domain-error.js';

/** The version a caller saw, from If-Match: "3". Without it a change is refused (428): it might undo another person's. */
export const IfMatch = createParamDecorator((_: unknown, context: ExecutionContext): number => {
  const header = context.switchToHttp().getRequest<Request>().headers['if-match'];
  if (header === undefined) throw new DomainError('version_required', 'Send the version that you saw in If-Match, as in If-Match: "3".');
  const version = /^"(\d{1,9})"$/.exec(header)?.[1];
  if (version === undefined) {
    throw new DomainError('invalid_request', 'If-Match must be one version in quotes, as in If-Match: "3".');
  }
  return Number(version);
});

export const etagOf = (version: number) => `"${version}"`;
