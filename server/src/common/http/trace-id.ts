import { randomUUID } from 'node:crypto';
import type { IncomingMessage } from 'node:http';
import type { NextFunction, Request, Response } from 'express';

/** Names a request, so that an answer and the lines in the log about it can be put together. Never taken from outside. */
export function traced(request: Request, _: Response, next: NextFunction): void {
  (request as IncomingMessage & { id?: unknown }).id = randomUUID();
  next();
}

export const traceIdOf = (request: IncomingMessage): string => String((request as { id?: unknown }).id ?? '');
