import type { RequestHandler } from 'express';
import helmet from 'helmet';

/**
 * Strict from the first day: nothing inline, nothing from elsewhere. `upgrade-insecure-requests`, helmet's default, is left
 * out: it stops every script where a tablet reaches the server by plain HTTP over USB.
 */
export function securityHeaders(secure: boolean): readonly RequestHandler[] {
  return [
    helmet({
      contentSecurityPolicy: {
        useDefaults: false,
        directives: {
          defaultSrc: ["'self'"],
          imgSrc: ["'self'", 'data:', 'blob:'],
          workerSrc: ["'self'"],
          objectSrc: ["'none'"],
          baseUri: ["'none'"],
          frameAncestors: ["'none'"],
          formAction: ["'self'"],
        },
      },
      strictTransportSecurity: secure ? { maxAge: 31_536_000, includeSubDomains: false } : false,
      referrerPolicy: { policy: 'same-origin' },
    }),
    (_request, response, next) => {
      response.set('permissions-policy', 'serial=(self), geolocation=(self), screen-wake-lock=(self), camera=(), microphone=()');
      next();
    },
  ];
}
