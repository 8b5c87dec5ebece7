import 'reflect-metadata';
import { NestFactory } from '@nestjs/core';
import type { NestExpressApplication } from '@nestjs/platform-express';
import { Logger } from 'nestjs-pino';
import { AppModule } from './app.module.js';
import { ConfigError, loadConfig, type Config } from './config/config.js';
import { configureApp } from './configure.js';
import { exitWithin } from './stop.js';

const config = readConfig();
const app = await NestFactory.create<NestExpressApplication>(AppModule, { bufferLogs: true, bodyParser: false });
app.useLogger(app.get(Logger));
configureApp(app);
app.enableShutdownHooks();
exitWithin(10_000);
const server = await app.listen(config.port, config.host);
server.headersTimeout = 30_000;
app.get(Logger).log(`listening on http://${config.host}:${config.port}`);

function readConfig(): Config {
  try {
    return loadConfig();
  } catch (error) {
    if (!(error instanceof ConfigError)) throw error;
    console.error(error.message);
    process.exit(1);
  }
}
