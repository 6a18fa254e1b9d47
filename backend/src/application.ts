import { existsSync } from 'node:fs';
import { join } from 'node:path';
import type { DynamicModule } from '@nestjs/common';
import { NestFactory } from '@nestjs/core';
import type { NestExpressApplication } from '@nestjs/platform-express';
import cookieParser from 'cookie-parser';
import type { NextFunction, Request, Response } from 'express';
import helmet from 'helmet';
import { Logger } from 'nestjs-pino';
import { AppModule } from './app.module';
import type { Database } from './database/database';
import { ApiDocument } from './docs/api-document';
import { bodyErrors } from './platform/body-errors';
import { Clock } from './platform/clock';
import type { Config } from './platform/config';
import { declaredRoutes } from './platform/contract/declared-actions';
import { Storage } from './platform/storage/storage';

/** The built web client. */
const CLIENT = join(__dirname, '..', '..', 'frontend', 'dist');

/** Builds the HTTP application, ready to listen. The database is the caller's to close, after the application. */
export async function createApplication(config: Config, database: Database, worker?: DynamicModule): Promise<NestExpressApplication> {
  const app = await NestFactory.create<NestExpressApplication>(AppModule.with(config, database, worker), { bodyParser: false, bufferLogs: true, abortOnError: false });
  return prepare(app, config);
}

/** What stands before the routes; tests build the application their own way and call this too. */
export async function prepare(app: NestExpressApplication, config: Config): Promise<NestExpressApplication> {
  app.useLogger(app.get(Logger));
  app.flushLogs();
  app.setGlobalPrefix('api');
  app.disable('x-powered-by');
  app.set('trust proxy', config.proxies);
  app.set('query parser', 'simple');
  app.use(securityHeaders(config));
  app.use(cookieParser());
  app.useBodyParser('json', { limit: '1mb', strict: true });
  app.use(bodyErrors);
  app.use('/api', (_request: Request, response: Response, next: NextFunction) => {
    response.setHeader('Cache-Control', 'no-store');
    next();
  });
  serveClient(app);
  await app.get(Storage).prepare(app.get(Clock).now());
  await app.init();
  declaredRoutes(app);
  app.get(ApiDocument, { strict: false }).describe(app);
  return app;
}

function securityHeaders(config: Config) {
  const https = config.publicUrl.startsWith('https:');
  return helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'self'"], scriptSrc: ["'self'"], styleSrc: ["'self'", "'unsafe-inline'"], imgSrc: ["'self'", 'data:', 'blob:'], fontSrc: ["'self'", 'data:'],
        connectSrc: ["'self'"], workerSrc: ["'self'", 'blob:'], objectSrc: ["'none'"], baseUri: ["'self'"], formAction: ["'self'"], frameAncestors: ["'none'"],
        ...(https ? { upgradeInsecureRequests: [] } : {}),
      },
    },
    strictTransportSecurity: https,
    crossOriginEmbedderPolicy: false,
    referrerPolicy: { policy: 'same-origin' },
  });
}

/** The client's files, whose names change with their content, and its one page for every address that is not the API's. */
function serveClient(app: NestExpressApplication): void {
  if (!existsSync(join(CLIENT, 'index.html'))) return;
  app.useStaticAssets(join(CLIENT, 'assets'), { prefix: '/assets', immutable: true, maxAge: '365d', fallthrough: false });
  app.useStaticAssets(CLIENT, { index: false, maxAge: 0 });
  app.use((request: Request, response: Response, next: NextFunction) => {
    const page = (request.method === 'GET' || request.method === 'HEAD') && !/^\/(api|problems)(\/|$)/.test(request.path) && !/\.[a-z0-9]+$/i.test(request.path);
    if (page) response.setHeader('Cache-Control', 'no-cache').sendFile(join(CLIENT, 'index.html'));
    else next();
  });
}
