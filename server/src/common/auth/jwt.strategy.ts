import { Inject, Injectable } from '@nestjs/common';
import { PassportStrategy } from '@nestjs/passport';
import { Strategy } from 'passport-jwt';
import type { Request } from 'express';
import type { Config } from '../../config/config.js';
import { CONFIG } from '../../config/config.module.js';
import { ALGORITHM, AUDIENCE, ISSUER, cookieName, type Claims } from './session-token.js';

/** The signed cookie. What it names, the session, is looked up by the guard. */
@Injectable()
export class JwtStrategy extends PassportStrategy(Strategy) {
  constructor(@Inject(CONFIG) config: Config) {
    super({
      jwtFromRequest: (request: Request) => (request.cookies as Record<string, string> | undefined)?.[cookieName(config)] ?? null,
      secretOrKey: config.jwtSecret,
      algorithms: [ALGORITHM],
      issuer: ISSUER,
      audience: AUDIENCE,
    });
  }

  validate(claims: Claims): Claims {
    return claims;
  }
}
