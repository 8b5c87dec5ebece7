import 'reflect-metadata';
import { NestFactory } from '@nestjs/core';
import type { NestExpressApplication } from '@nestjs/platform-express';
import { Logger } from 'nestjs-pino';
import { AppModule } from './app.module.js';
import { configOrExit } from './config/config-or-exit.js';
import { configureApp } from './configure.js';
import { FirstAdministratorService } from './modules/accounts/first-administrator.service.js';
import { stopOnSignal } from './stop.js';

const config = configOrExit();
const app = await NestFactory.create<NestExpressApplication>(AppModule, { bufferLogs: true, bodyParser: false });
app.useLogger(app.get(Logger));
configureApp(app);
stopOnSignal(() => app.close(), 10_000);
const server = await app.listen(config.port, config.host);
server.headersTimeout = 30_000;
const invitation = config.mode === 'production' ? await app.get(FirstAdministratorService).invite() : null;
if (invitation)
  process.stdout.write(`\n  This site has no administrator yet. Open the first account here, within a day:\n  ${invitation}\n\n`);
app.get(Logger).log(`listening on ${await app.getUrl()}`);
