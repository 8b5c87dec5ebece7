import { Global, Inject, Module, type OnApplicationShutdown } from '@nestjs/common';
import type { Knex } from 'knex';
import type { Config } from '../config/config.js';
import { CONFIG } from '../config/config.module.js';
import { KNEX, createKnex } from './knex.js';
import { Listener } from './listener.js';

@Global()
@Module({
  providers: [
    {
      provide: KNEX,
      inject: [CONFIG],
      useFactory: (config: Config) => createKnex(config.databaseUrl, { applicationName: 'foreveil api' }),
    },
    { provide: Listener, inject: [CONFIG], useFactory: (config: Config) => new Listener(config.databaseUrl) },
  ],
  exports: [KNEX, Listener],
})
export class DatabaseModule implements OnApplicationShutdown {
  constructor(
    @Inject(KNEX) private readonly db: Knex,
    @Inject(Listener) private readonly listener: Listener,
  ) {}

  async onApplicationShutdown(): Promise<void> {
    await this.listener.close();
    await this.db.destroy();
  }
}
