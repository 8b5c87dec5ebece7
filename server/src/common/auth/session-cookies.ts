import { Inject, Injectable } from '@nestjs/common';
import { JwtService } from '@nestjs/jwt';
import type { Response } from 'express';
import type { Config } from '../../config/config.js';
import { CONFIG } from '../../config/config.module.js';
import { ALGORITHM, AUDIENCE, ISSUER, cookieName, cookieOptions, type Claims } from './session-token.js';

/** Puts a session into the browser's cookie, and takes it out again. */
@Injectable()
export class SessionCookies {
  constructor(
    @Inject(CONFIG) private readonly config: Config,
    private readonly jwt: JwtService,
  ) {}

  async give(response: Response, { sub, sid, gen }: Claims): Promise<void> {
    const seconds = this.config.sessionHours * 3600;
    const token = await this.jwt.signAsync({ sub, sid, gen } satisfies Claims, {
      secret: this.config.jwtSecret,
      ...{ algorithm: ALGORITHM, issuer: ISSUER, audience: AUDIENCE, expiresIn: seconds },
    });
    response.cookie(cookieName(this.config), token, { ...cookieOptions(this.config), maxAge: seconds * 1000 });
  }

  takeBack(response: Response): void {
    response.clearCookie(cookieName(this.config), cookieOptions(this.config));
  }
}
