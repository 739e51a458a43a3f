import express, { type Express } from 'express';
import type { Logger } from 'pino';
import { requireSameOrigin } from '#server/auth/same-origin.ts';
import { isBusy } from '#server/db/connect.ts';
import { errorAnswer } from '#server/routes/error-answer.ts';
import { apiRouter } from '#server/routes/mount.ts';
import type { ServiceDeps } from '#server/services/context.ts';
import { type Config, servesSecurely } from './config.ts';
import { requestLog } from './log.ts';
import { securityHeaders } from './security-headers.ts';
import { ServiceError } from './service-error.ts';
import { staticFiles } from './static-files.ts';

export interface AppOptions {
  readonly config: Config;
  readonly deps: ServiceDeps;
  readonly logger: Logger;
  /** Folder of the built application; null serves the API alone. */
  readonly dist: string | null;
}

/** The whole HTTP application, not yet listening. */
export function createApp({ config, deps, logger, dist }: AppOptions): Express {
  const secure = servesSecurely(config);
  const app = express();
  app.disable('x-powered-by');
  app.set('trust proxy', config.trustedProxies);
  app.use((_request, response, next) => {
    response.locals['arrivedMs'] = deps.now();
    next();
  });
  app.use(requestLog(logger));
  app.use(...securityHeaders(secure));
  app.use('/api', (_request, response, next) => {
    response.set('cache-control', 'no-store');
    next();
  });
  app.use('/api', requireSameOrigin(config.publicOrigin));
  app.use('/api', apiRouter(deps, { secure }));
  app.use('/api', () => {
    throw new ServiceError('NOT_FOUND', 'There is nothing at this address.');
  });
  if (dist !== null) app.use(staticFiles(dist));
  app.use(() => {
    throw new ServiceError('NOT_FOUND', 'There is nothing at this address.');
  });
  app.use(errorAnswer(isBusy));
  return app;
}
