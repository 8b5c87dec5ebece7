import 'reflect-metadata';
import type { NestExpressApplication } from '@nestjs/platform-express';
import type { OpenAPIObject } from '@nestjs/swagger';
import { Test } from '@nestjs/testing';
import type { Knex } from 'knex';
import { AppModule } from '../../../server/src/app.module.js';
import { loadConfig, type Config } from '../../../server/src/config/config.js';
import { CONFIG } from '../../../server/src/config/config.module.js';
import { configureApp } from '../../../server/src/configure.js';
import { KNEX } from '../../../server/src/database/knex.js';
import { makeDatabase, type TestDatabase } from './database.js';

/** The API in this process, on a database of its own. */
export interface Api {
  readonly app: NestExpressApplication;
  readonly db: Knex;
  readonly config: Config;
  readonly document: OpenAPIObject;
  readonly database: TestDatabase;
  /** 'http://127.0.0.1:PORT' */
  readonly url: string;
  close(): Promise<void>;
}

/** @param changes to the configuration of a test run */
export async function startApi(changes: Partial<Config> = {}): Promise<Api> {
  const database = await makeDatabase();
  const config = { ...testConfig(database.url), ...changes };
  const module = await Test.createTestingModule({ imports: [AppModule] })
    .overrideProvider(CONFIG)
    .useValue(config)
    .compile();
  const app = module.createNestApplication<NestExpressApplication>({ bodyParser: false, logger: false });
  const document = configureApp(app);
  await app.listen(0, '127.0.0.1');
  const close = async () => {
    await app.close();
    await database.drop();
  };
  return { app, db: app.get<Knex>(KNEX), config, document, database, url: await app.getUrl(), close };
}

/** As in every test run: passwords are hashed with little work, and nobody is slowed down unless a test is about that. */
export const testConfig = (databaseUrl: string): Config => ({
  ...loadConfig({ NODE_ENV: 'test', DATABASE_URL: databaseUrl, PASSWORD_COST: '4', CLIENT_DIR: '/nowhere' }),
  signInPerAccount: 10_000,
  signInPerAddress: 10_000,
});
