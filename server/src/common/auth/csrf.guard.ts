import { Inject, Injectable, type CanActivate, type ExecutionContext } from '@nestjs/common';
import type { Request } from 'express';
import type { Config } from '../../config/config.js';
import { CONFIG } from '../../config/config.module.js';
import { DomainError } from '../errors/domain-error.js';
import { bearerOf } from './access-tokens.js';

const HARMLESS = new Set(['GET', 'HEAD', 'OPTIONS']);

/**
 * A request that changes something must show that it comes from our own pages: by an Origin that is ours, or, where a program sends no
 * Origin, by the header X-Foreveil, which no page of another site can add without being asked first. A request with an access token shows it
 * by that: the token is in a header of the same kind, and the cookie is then not looked at.
 */
@Injectable()
export class CsrfGuard implements CanActivate {
  constructor(@Inject(CONFIG) private readonly config: Config) {}

  canActivate(context: ExecutionContext): boolean {
    const request = context.switchToHttp().getRequest<Request>();
    if (HARMLESS.has(request.method) || bearerOf(request.headers) || this.isOurs(request)) return true;
    throw new DomainError('cross_site', 'Changes are taken from this site only: send its Origin, or the header X-Foreveil: 1.');
  }

  private isOurs({ headers }: Request): boolean {
    if (headers.origin === undefined) return headers['x-foreveil'] === '1' && headers['sec-fetch-site'] !== 'cross-site';
    if (this.config.origin !== null) return headers.origin === this.config.origin;
    return URL.canParse(headers.origin) && new URL(headers.origin).host === headers.host;
  }
}
