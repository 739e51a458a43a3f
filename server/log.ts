import { randomUUID } from 'node:crypto';
import { type Logger, pino } from 'pino';
import { type HttpLogger, pinoHttp } from 'pino-http';
import type { Config } from './config.ts';

export const createLogger = (level: Config['logLevel']): Logger => pino({ level, base: null, timestamp: pino.stdTimeFunctions.isoTime });

/** One line a request. No headers and no bodies: they hold cookies, grants and passwords. */
export function requestLog(logger: Logger): HttpLogger {
  return pinoHttp({
    logger,
    genReqId: (_request, response) => {
      const id = randomUUID();
      response.setHeader('x-request-id', id);
      return id;
    },
    serializers: {
      req: (request: { id: string; method: string; url: string }) => ({ id: request.id, method: request.method, url: request.url }),
      res: (response: { statusCode: number }) => ({ statusCode: response.statusCode }),
    },
    customLogLevel: (_request, response, error) => (error || response.statusCode >= 500 ? 'error' : 'debug'),
  });
}
