import { Module } from '@nestjs/common';
import { APP_GUARD } from '@nestjs/core';
import { PassportModule } from '@nestjs/passport';
import { CsrfGuard } from './csrf.guard.js';
import { JwtStrategy } from './jwt.strategy.js';
import { RoleGuard } from './role.guard.js';
import { SessionGuard } from './session.guard.js';

/** The three doors of every route, in this order: from our site, signed in, allowed. */
@Module({
  imports: [PassportModule],
  providers: [
    JwtStrategy,
    { provide: APP_GUARD, useClass: CsrfGuard },
    { provide: APP_GUARD, useClass: SessionGuard },
    { provide: APP_GUARD, useClass: RoleGuard },
  ],
})
export class AuthModule {}
