import { Injectable, type CallHandler, type ExecutionContext, type NestInterceptor } from '@nestjs/common';
import type { Request, Response } from 'express';
import { of, type Observable } from 'rxjs';
import { hasFresh } from './fresh.js';

/**
 * For bytes that never change at their address: the address is their ETag, and who has them is answered 304 without any reading. Guards have
 * run before: who may not see them is refused first.
 */
@Injectable()
export class Immutable implements NestInterceptor {
  intercept(context: ExecutionContext, next: CallHandler): Observable<unknown> {
    const request = context.switchToHttp().getRequest<Request>();
    const response = context.switchToHttp().getResponse<Response>();
    const tag = request.path.split('/').slice(-2).join('-');
    return hasFresh(request, response, tag) ? of(undefined) : next.handle();
  }
}
