import type { IncomingMessage } from 'node:http';
import { RequestMethod } from '@nestjs/common';
import { LoggerModule } from 'nestjs-pino';
import type { Config } from '../../config/config.js';
import { traceIdOf } from '../http/trace-id.js';
import { CONFIG } from '../../config/config.module.js';

/** What must never reach a log line. */
const SECRET = ['req.headers.cookie', 'req.headers.authorization', 'res.headers["set-cookie"]', 'req.body', '*.password'];

/** One JSON line per API request, with the trace id that the answer carries and the person's id. */
export const LogModule = LoggerModule.forRootAsync({
  inject: [CONFIG],
  useFactory: (config: Config) => ({
    forRoutes: [{ path: '{*path}', method: RequestMethod.ALL }],
    pinoHttp: {
      level: config.logLevel,
      redact: SECRET,
      genReqId: traceIdOf,
      autoLogging: { ignore: (request: IncomingMessage) => !request.url?.startsWith('/api/') || request.url.startsWith('/api/health/') },
      customProps: (request: IncomingMessage) => ({ userId: (request as { user?: { userId: string } }).user?.userId }),
      serializers: {
        res: ({ statusCode }: { statusCode: number }) => ({ statusCode }),
        req: ({ id, method, url, remoteAddress }: Record<string, unknown>) => ({ id, method, url, remoteAddress }),
      },
    },
  }),
});
