import { Global, Module } from '@nestjs/common';
import { ThrottlerModule } from '@nestjs/throttler';
import { STOLEN_SESSIONS } from '../../common/auth/stolen-sessions.js';
import type { Config } from '../../config/config.js';
import { CONFIG } from '../../config/config.module.js';
import { AccountsController } from './accounts.controller.js';
import { AccountsService } from './accounts.service.js';
import { FirstAdministratorService } from './first-administrator.service.js';
import { LinksController } from './links.controller.js';
import { LinksService } from './links.service.js';
import { OwnAccountController } from './own-account.controller.js';
import { OwnAccountService } from './own-account.service.js';
import { SecondFactorService } from './second-factor/second-factor.service.js';
import { trackAccount, trackAddress } from './sign-in-throttle.guard.js';

const MINUTE = 60_000;

@Global()
@Module({
  imports: [
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
  controllers: [AccountsController, OwnAccountController, LinksController],
  providers: [
    AccountsService,
    OwnAccountService,
    LinksService,
    SecondFactorService,
    FirstAdministratorService,
    { provide: STOLEN_SESSIONS, useExisting: OwnAccountService },
  ],
  exports: [STOLEN_SESSIONS, AccountsService, FirstAdministratorService],
})
export class AccountsModule {}
