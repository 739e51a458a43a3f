import type { RequestHandler } from 'express';
import { ServiceError } from '#server/service-error.ts';

/**
 * Requests that change something must come from this very origin and carry a content type no HTML form can send. Source:
 * OWASP ASVS 5.0, 3.5.1 to 3.5.3. Browsers send Sec-Fetch-Site or Origin with every such request; one of them is required.
 */
const SAFE = new Set(['GET', 'HEAD', 'OPTIONS']);
const LOOPBACK = new Set(['localhost', '127.0.0.1', '[::1]']);
const TYPES = /^application\/(json|octet-stream)(;|$)/;

/** Without a public origin only loopback names count, so that a foreign name pointed at this machine cannot act. */
export function isOwnOrigin(origin: string, host: string | undefined, publicOrigin: string | null): boolean {
  if (publicOrigin !== null) return origin === publicOrigin;
  if (!URL.canParse(origin)) return false;
  const url = new URL(origin);
  return url.host === host && LOOPBACK.has(url.hostname);
}

export function requireSameOrigin(publicOrigin: string | null): RequestHandler {
  return (request, _response, next) => {
    if (SAFE.has(request.method)) return next();
    const site = request.get('sec-fetch-site');
    const origin = request.get('origin');
    const siteIsOurs = site === undefined || site === 'same-origin';
    const originIsOurs = origin === undefined || isOwnOrigin(origin, request.get('host'), publicOrigin);
    if ((site === undefined && origin === undefined) || !siteIsOurs || !originIsOurs) {
      throw new ServiceError(
        'CROSS_ORIGIN',
        'This request did not come from Evenline itself. Open Evenline at its own address and try again.',
      );
    }
    if (!TYPES.test(request.get('content-type') ?? '')) {
      throw new ServiceError('UNSUPPORTED_CONTENT_TYPE', 'Send application/json, or application/octet-stream for a chunk.');
    }
    next();
  };
}
