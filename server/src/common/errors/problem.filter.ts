import { Catch, Logger, type ArgumentsHost, type ExceptionFilter } from '@nestjs/common';
import type { Problem } from '@foreveil/shared';
import type { Request, Response } from 'express';
import { allowedMethods } from '../http/routes.js';
import { traceIdOf } from '../http/trace-id.js';
import { DomainError, REFUSALS } from './domain-error.js';
import { toDomainError } from './to-domain-error.js';

/** The only place where a failed request is answered: RFC 9457 problem+json, and nothing of the inside for what nobody expected. */
@Catch()
export class ProblemFilter implements ExceptionFilter {
  private readonly logger = new Logger('Problem');

  catch(error: unknown, host: ArgumentsHost): void {
    const request = host.switchToHttp().getRequest<Request>();
    const response = host.switchToHttp().getResponse<Response>();
    const refusal = this.refusalFor(error, request, response);
    if (REFUSALS[refusal.code].status >= 500) this.logger.error(error instanceof Error ? (error.stack ?? error.message) : String(error));
    if (response.headersSent) {
      response.destroy();
      return;
    }
    response.removeHeader('ETag');
    response.setHeader('Cache-Control', 'no-store');
    if (refusal.more.retryAfter) response.setHeader('Retry-After', Math.ceil(refusal.more.retryAfter));
    const problem = asProblem(refusal, request);
    response.status(problem.status).type('application/problem+json').send(JSON.stringify(problem));
  }

  private refusalFor(error: unknown, request: Request, response: Response): DomainError {
    const refusal =
      toDomainError(error) ?? new DomainError('internal', 'Something went wrong on the server. It was logged with this trace id.');
    if (refusal.code !== 'not_found') return refusal;
    const allowed = allowedMethods(request.app, request.path);
    if (!allowed.length || allowed.includes(request.method)) return refusal;
    response.setHeader('Allow', allowed.join(', '));
    return new DomainError('method_not_allowed', `This address answers to ${allowed.join(', ')} only.`);
  }
}

function asProblem({ code, message, more }: DomainError, request: Request): Problem {
  const { status, title } = REFUSALS[code];
  return {
    type: `urn:foreveil:problem:${code}`,
    title,
    status: more.status ?? status,
    detail: message,
    instance: request.originalUrl.split('?')[0] ?? '',
    code,
    traceId: traceIdOf(request),
    ...(more.errors ? { errors: more.errors } : {}),
    ...(more.current === undefined ? {} : { current: more.current }),
  };
}
