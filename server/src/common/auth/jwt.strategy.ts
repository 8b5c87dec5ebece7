import { Inject, Injectable } from '@nestjs/common';
import { PassportStrategy } from '@nestjs/passport';
import type { Knex } from 'knex';
import { Strategy } from 'passport-jwt';
import type { Request } from 'express';
import type { Config } from '../../config/config.js';
import { CONFIG } from '../../config/config.module.js';
import { KNEX } from '../../database/knex.js';
import type { Actor } from './actor.js';
import { ALGORITHM, AUDIENCE, ISSUER, cookieName, type Claims } from './session-token.js';
import { liveSession } from './sessions.js';

/** Signed cookie, then the session row: signing out, a closed account or a timeout count from the very next request. */
@Injectable()
export class JwtStrategy extends PassportStrategy(Strategy) {
  constructor(
    @Inject(CONFIG) private readonly config: Config,
    @Inject(KNEX) private readonly db: Knex,
  ) {
    super({
      jwtFromRequest: (request: Request) => (request.cookies as Record<string, string> | undefined)?.[cookieName(config)] ?? null,
      secretOrKey: config.jwtSecret,
      algorithms: [ALGORITHM],
      issuer: ISSUER,
      audience: AUDIENCE,
    });
  }

  async validate(claims: Claims): Promise<Actor | false> {
    return (await liveSession(this.db, claims, this.config.sessionIdleMinutes)) ?? false;
  }
}
