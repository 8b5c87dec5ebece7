import { Module } from '@nestjs/common';
import { JwtModule } from '@nestjs/jwt';
import { ThrottlerModule } from '@nestjs/throttler';
import { ALGORITHM, AUDIENCE, ISSUER } from '../../common/auth/session-token.js';
import type { Config } from '../../config/config.js';
import { CONFIG } from '../../config/config.module.js';
import { AccountsController } from './accounts.controller.js';
import { AccountsService } from './accounts.service.js';
import { trackAccount, trackAddress } from './sign-in-throttle.guard.js';

const MINUTE = 60_000;

@Module({
  imports: [
    JwtModule.registerAsync({
      inject: [CONFIG],
      useFactory: (config: Config) => ({
        secret: config.jwtSecret,
        signOptions: { algorithm: ALGORITHM, issuer: ISSUER, audience: AUDIENCE, expiresIn: config.sessionHours * 3600 },
      }),
    }),
    ThrottlerModule.forRootAsync({
      inject: [CONFIG],
      useFactory: (config: Config) => ({
        setHeaders: false,
        throttlers: [
          { name: 'account', ttl: 5 * MINUTE, limit: config.signInPerAccount, getTracker: trackAccount },
          { name: 'address', ttl: MINUTE, limit: config.signInPerAddress, getTracker: trackAddress },
        ],
      }),
    }),
  ],
  controllers: [AccountsController],
  providers: [AccountsService],
})
export class AccountsModule {}
