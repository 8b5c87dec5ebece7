import { Injectable, type CallHandler, type ExecutionContext, type NestInterceptor } from '@nestjs/common';
import type { Request, Response } from 'express';
import { tap, type Observable } from 'rxjs';
import { etagOf } from './if-match.js';

/**
 * Sends the `version` of the answered row as its ETag too: what a change has to name. It does not count what hangs on the row (a target's
 * spectra), so nobody is told that nothing changed because of it.
 */
@Injectable()
export class VersionEtag implements NestInterceptor<{ version: number }> {
  intercept(context: ExecutionContext, next: CallHandler<{ version: number }>): Observable<{ version: number }> {
    const response = context.switchToHttp().getResponse<Response>();
    delete context.switchToHttp().getRequest<Request>().headers['if-none-match'];
    return next.handle().pipe(tap(({ version }) => response.setHeader('ETag', etagOf(version))));
  }
}
