import { Injectable, type CallHandler, type ExecutionContext, type NestInterceptor } from '@nestjs/common';
import type { Response } from 'express';
import { tap, type Observable } from 'rxjs';
import { etagOf } from './if-match.js';

/** Sends the `version` of the answered row as its ETag too. */
@Injectable()
export class VersionEtag implements NestInterceptor<{ version: number }> {
  intercept(context: ExecutionContext, next: CallHandler<{ version: number }>): Observable<{ version: number }> {
    const response = context.switchToHttp().getResponse<Response>();
    return next.handle().pipe(tap(({ version }) => response.setHeader('ETag', etagOf(version))));
  }
}
