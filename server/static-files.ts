import { existsSync } from 'node:fs';
import { join } from 'node:path';
import express, { type RequestHandler, Router } from 'express';

const YEAR = 'public, max-age=31536000, immutable';

/**
 * The built application. Files under assets/ carry a hash of their content in their name and may be kept for ever; all
 * others are asked for anew each time, `sw.js` and `index.html` above all, so that a deploy is noticed.
 */
export function staticFiles(folder: string): Router {
  const router = Router();
  const index = join(folder, 'index.html');
  router.use(
    express.static(folder, {
      index: 'index.html',
      redirect: false,
      setHeaders: (response, path) => response.set('cache-control', path.startsWith(join(folder, 'assets')) ? YEAR : 'no-cache'),
    }),
  );
  router.use(page(index));
  return router;
}

/** Any address that is no file is a page of the application; the router in the browser knows which. */
function page(index: string): RequestHandler {
  return (request, response, next) => {
    const wantsPage = request.method === 'GET' || request.method === 'HEAD';
    // A missing script must not be answered with a page: the browser would run HTML.
    if (!wantsPage || /\.[a-z0-9]+$/i.test(request.path) || !existsSync(index)) return next();
    response.set('cache-control', 'no-cache').sendFile(index);
  };
}
