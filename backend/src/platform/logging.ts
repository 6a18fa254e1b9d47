import type { IncomingMessage } from 'node:http';
import { RequestMethod } from '@nestjs/common';
import { LoggerModule } from 'nestjs-pino';
import { Config } from './config';
import { newId } from './ids';

/** One line of JSON for each request that failed or changed something; never a token, a cookie or a password. */
export const loggingModule = LoggerModule.forRootAsync({
  inject: [Config],
  useFactory: (config: Config) => ({
    forRoutes: [{ path: '{*path}', method: RequestMethod.ALL }],
    pinoHttp: {
      level: config.logLevel,
      base: null,
      genReqId: (_request: IncomingMessage, response: { setHeader(name: string, value: string): unknown }) => {
        const id = newId();
        response.setHeader('X-Request-Id', id);
        return id;
      },
      redact: ['req.headers.authorization', 'req.headers.cookie', 'res.headers["set-cookie"]', '*.password', '*.newPassword', '*.accessToken'],
      autoLogging: { ignore: (request: IncomingMessage) => !(request.url ?? '').startsWith('/api/') || (request.url ?? '').startsWith('/api/health') },
      serializers: {
        req: (request: { id: string; method: string; url: string }) => ({ id: request.id, method: request.method, url: withoutQuery(request.url) }),
        res: (response: { statusCode: number }) => ({ statusCode: response.statusCode }),
      },
      customLogLevel: (_request: IncomingMessage, response: { statusCode: number }, error?: Error) =>
        error !== undefined || response.statusCode >= 500 ? 'error' as const : response.statusCode >= 400 ? 'info' as const : 'debug' as const,
    },
  }),
});

/** A verification code or a customer's name may stand in the query: it is not logged. */
const withoutQuery = (url: string): string => url.split('?', 1)[0] ?? '';
