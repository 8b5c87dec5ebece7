import type { NestExpressApplication } from '@nestjs/platform-express';
import { DocumentBuilder, SwaggerModule, type OpenAPIObject } from '@nestjs/swagger';
import { PROGRAM_VERSION } from '@foreveil/shared';
import cookieParser from 'cookie-parser';
import type { NextFunction, Request, Response } from 'express';
import helmet from 'helmet';
import { cookieName } from './common/auth/session-token.js';
import { withProblems } from './common/errors/openapi.js';
import { DomainError } from './common/errors/domain-error.js';
import { traced } from './common/http/trace-id.js';
import type { Config } from './config/config.js';
import { CONFIG } from './config/config.module.js';

const LONGEST_URL = 8 * 1024;
const JSON_LIMIT = '1mb';

/** Everything that the program and the tests must set up alike. @returns the OpenAPI document, which is also served */
export function configureApp(app: NestExpressApplication): OpenAPIObject {
  const config = app.get<Config>(CONFIG);
  app.setGlobalPrefix('api');
  app.disable('x-powered-by');
  app.set('etag', false);
  app.set('query parser', 'simple');
  if (config.trustedProxies.length) app.set('trust proxy', config.trustedProxies);
  app.use(traced);
  app.use(helmet(headers(config)));
  app.use(longUrlsRefused);
  app.use(hiddenFilesRefused);
  app.use('/api', answersNotKept);
  app.use(cookieParser());
  app.useBodyParser('json', { limit: JSON_LIMIT });
  return serveDocument(app, config);
}

/** Mantine writes its colour variables into style elements; everything else comes from here and nowhere else. */
const headers = ({ secureCookies }: Config): Parameters<typeof helmet>[0] => ({
  strictTransportSecurity: secureCookies ? { maxAge: 31_536_000, includeSubDomains: true } : false,
  referrerPolicy: { policy: 'same-origin' },
  contentSecurityPolicy: {
    useDefaults: false,
    directives: {
      defaultSrc: ["'self'"],
      scriptSrc: ["'self'"],
      styleSrc: ["'self'", "'unsafe-inline'"],
      imgSrc: ["'self'", 'data:', 'blob:'],
      fontSrc: ["'self'", 'data:'],
      connectSrc: ["'self'"],
      workerSrc: ["'self'", 'blob:'],
      objectSrc: ["'none'"],
      baseUri: ["'none'"],
      formAction: ["'self'"],
      frameAncestors: ["'none'"],
    },
  },
});

function longUrlsRefused(request: Request, _: Response, next: NextFunction): void {
  next(request.url.length > LONGEST_URL ? new DomainError('too_large', 'The address is too long.', { status: 414 }) : undefined);
}

/** Nothing of ours begins with a dot; without this such an address would be answered with the client's first page. */
function hiddenFilesRefused(request: Request, _: Response, next: NextFunction): void {
  next(/\/\./.test(request.path) ? new DomainError('not_found', 'There is nothing at this address.') : undefined);
}

/** Answers of the API are of the moment and of one person. Routes of unchanging bytes say otherwise themselves. */
function answersNotKept(_: Request, response: Response, next: NextFunction): void {
  response.setHeader('Cache-Control', 'no-store');
  next();
}

function serveDocument(app: NestExpressApplication, config: Config): OpenAPIObject {
  const about = new DocumentBuilder().setTitle('Foreveil').setVersion(PROGRAM_VERSION).addCookieAuth(cookieName(config)).build();
  const document = withProblems(SwaggerModule.createDocument(app, about));
  SwaggerModule.setup('api/docs', app, document, { jsonDocumentUrl: 'api/openapi.json', swaggerUiEnabled: config.apiDocs, raw: ['json'] });
  return document;
}
