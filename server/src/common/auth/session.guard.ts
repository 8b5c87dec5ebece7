import { Inject, Injectable, type ExecutionContext } from '@nestjs/common';
import { Reflector } from '@nestjs/core';
import { AuthGuard } from '@nestjs/passport';
import type { Request, Response } from 'express';
import type { Knex } from 'knex';
import type { Config } from '../../config/config.js';
import { CONFIG } from '../../config/config.module.js';
import { KNEX } from '../../database/knex.js';
import { DomainError } from '../errors/domain-error.js';
import { bearerOf, tokenActor } from './access-tokens.js';
import type { Actor } from './actor.js';
import { RULE, type Rule } from './rules.js';
import { SessionCookies } from './session-cookies.js';
import { STOLEN_SESSIONS, type StolenSessions } from './stolen-sessions.js';
import type { Claims } from './session-token.js';
import { openSession } from './sessions.js';

/**
 * Nobody passes without a session or an access token, except where the route says that anyone may. Both are looked up at every request:
 * signing out, a closed account or a timeout count from the very next one.
 */
@Injectable()
export class SessionGuard extends AuthGuard('jwt') {
  constructor(
    private readonly reflector: Reflector,
    @Inject(KNEX) private readonly db: Knex,
    @Inject(CONFIG) private readonly config: Config,
    private readonly cookies: SessionCookies,
    @Inject(STOLEN_SESSIONS) private readonly stolen: StolenSessions,
  ) {
    super();
  }

  override async canActivate(context: ExecutionContext): Promise<boolean> {
    const rule = this.reflector.get<Rule | undefined>(RULE, context.getHandler());
    if (rule?.who === 'anyone') return true;
    const request = context.switchToHttp().getRequest<Request & { user: unknown }>();
    const bearer = bearerOf(request.headers);
    if (bearer !== null) {
      request.user = (await tokenActor(this.db, bearer)) ?? notSignedIn();
      return true;
    }
    await super.canActivate(context);
    request.user = await this.open(request.user as Claims, context.switchToHttp().getResponse<Response>());
    return true;
  }

  override handleRequest<T>(error: unknown, claims: T | false): T {
    if (error) throw error;
    return claims || notSignedIn();
  }

  private async open(claims: Claims, response: Response): Promise<Actor> {
    const { sessionIdleMinutes: idleMinutes, sessionRotateMinutes: rotateMinutes } = this.config;
    const opened = await openSession(this.db, claims, { idleMinutes, rotateMinutes });
    if (opened.end === 'replayed') await this.stolen.end(claims.sid, claims.sub);
    if (opened.end !== 'open') return notSignedIn();
    if (opened.next !== null) await this.cookies.give(response, { ...claims, gen: opened.next });
    return opened.actor;
  }
}

function notSignedIn(): never {
  throw new DomainError('not_signed_in', 'Sign in to do this.');
}
