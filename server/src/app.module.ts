import { existsSync } from 'node:fs';
import { Module } from '@nestjs/common';
import { APP_FILTER, APP_PIPE } from '@nestjs/core';
import { ServeStaticModule } from '@nestjs/serve-static';
import { AuthModule } from './common/auth/auth.module.js';
import { ProblemFilter } from './common/errors/problem.filter.js';
import { validationPipe } from './common/errors/validation.js';
import { LogModule } from './common/log/log.module.js';
import type { Config } from './config/config.js';
import { CONFIG, ConfigModule } from './config/config.module.js';
import { DatabaseModule } from './database/database.module.js';
import { AccountsModule } from './modules/accounts/accounts.module.js';
import { AnalysesModule } from './modules/analyses/analyses.module.js';
import { CloudsModule } from './modules/clouds/clouds.module.js';
import { ComparisonsModule } from './modules/comparisons/comparisons.module.js';
import { AnalysisRecipesModule } from './modules/analysisrecipes/analysis-recipes.module.js';
import { EventsModule } from './modules/events/events.module.js';
import { HealthModule } from './modules/health/health.module.js';
import { IdentificationsModule } from './modules/identifications/identifications.module.js';
import { LineListsModule } from './modules/linelists/linelists.module.js';
import { AdminModule } from './modules/admin/admin.module.js';
import { InvitationsModule } from './modules/invitations/invitations.module.js';
import { MembersModule } from './modules/members/members.module.js';
import { TokensModule } from './modules/tokens/tokens.module.js';
import { MailModule } from './modules/mail/mail.module.js';
import { ProgrammesModule } from './modules/programmes/programmes.module.js';
import { RecipesModule } from './modules/recipes/recipes.module.js';
import { ReportsModule } from './modules/reports/reports.module.js';
import { SearchModule } from './modules/search/search.module.js';
import { SpectraModule } from './modules/spectra/spectra.module.js';
import { TargetsModule } from './modules/targets/targets.module.js';
import { UnplacedModule } from './modules/unplaced/unplaced.module.js';

/** The built client, where there is one: any address but those of the API and of its own files is a page of it. */
const ClientModule = ServeStaticModule.forRootAsync({
  inject: [CONFIG],
  useFactory: ({ clientDir }: Config) =>
    existsSync(clientDir)
      ? [
          {
            rootPath: clientDir,
            exclude: ['/api/{*rest}', '/assets/{*rest}'],
            serveStaticOptions: {
              setHeaders: (response, path) =>
                void response.setHeader('Cache-Control', path.includes('/assets/') ? 'public, max-age=31536000, immutable' : 'no-cache'),
            },
          },
        ]
      : [],
});

@Module({
  imports: [
    ConfigModule,
    LogModule,
    ClientModule,
    DatabaseModule,
    AuthModule,
    AccountsModule,
    ProgrammesModule,
    TargetsModule,
    SpectraModule,
    RecipesModule,
    LineListsModule,
    SearchModule,
    AnalysesModule,
    ComparisonsModule,
    CloudsModule,
    AnalysisRecipesModule,
    IdentificationsModule,
    UnplacedModule,
    ReportsModule,
    EventsModule,
    MailModule,
    TokensModule,
    InvitationsModule,
    MembersModule,
    AdminModule,
    HealthModule,
  ],
  providers: [
    { provide: APP_FILTER, useClass: ProblemFilter },
    { provide: APP_PIPE, useFactory: validationPipe },
  ],
})
export class AppModule {}
