import { Global, Module } from '@nestjs/common';
import { APP_GUARD } from '@nestjs/core';
import { JwtModule } from '@nestjs/jwt';
import { PassportModule } from '@nestjs/passport';
import { CsrfGuard } from './csrf.guard.js';
import { JwtStrategy } from './jwt.strategy.js';
import { RoleGuard } from './role.guard.js';
import { SessionCookies } from './session-cookies.js';
import { SessionGuard } from './session.guard.js';

/** The three doors of every route, in this order: from our site, signed in, allowed. */
@Global()
@Module({
  imports: [PassportModule, JwtModule.register({})],
  providers: [
    JwtStrategy,
    SessionCookies,
    { provide: APP_GUARD, useClass: CsrfGuard },
    { provide: APP_GUARD, useClass: SessionGuard },
    { provide: APP_GUARD, useClass: RoleGuard },
  ],
  exports: [SessionCookies],
})
export class AuthModule {}
