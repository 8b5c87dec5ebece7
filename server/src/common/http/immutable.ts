import { Injectable, type CallHandler, type ExecutionContext, type NestInterceptor } from '@nestjs/common';
import type { Request, Response } from 'express';
import { of, type Observable } from 'rxjs';

/**
 * For bytes that never change at their address: the address is their ETag, so a browser that has them asks whether it still may
 * (no-cache) and is answered 304 without any reading. Guards have run before: who may not see them is refused first.
 */
@Injectable()
export class Immutable implements NestInterceptor {
  intercept(context: ExecutionContext, next: CallHandler): Observable<unknown> {
    const request = context.switchToHttp().getRequest<Request>();
    const response = context.switchToHttp().getResponse<Response>();
    response.setHeader('ETag', `"${request.path.split('/').slice(-2).join('-')}"`);
    response.setHeader('Cache-Control', 'private, no-cache');
    delete request.headers['cache-control']; // asking caches for a fresh answer; ours says whether the bytes are still these
    return request.fresh ? of(undefined) : next.handle(); // express answers an empty body for a fresh request with 304
  }
}
