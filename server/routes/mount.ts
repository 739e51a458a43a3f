import express, { type RequestHandler, Router } from 'express';
import type { Actor } from '#server/auth/actor.ts';
import { type CookieOptions, readAuthCookie, readBearer } from '#server/auth/cookie.ts';
import { PERMISSIONS } from '#server/auth/permissions.ts';
import { ServiceError } from '#server/service-error.ts';
import { identifyByCookie, identifyByGrant } from '#server/services/accounts/identify.ts';
import type { ServiceDeps } from '#server/services/context.ts';
import { CHUNK_MAX_BYTES } from '#shared/api/runs.ts';
import { ALL_ROUTES } from './all-routes.ts';
import { readJson } from './read-json.ts';
import type { Call, Route } from './route.ts';

const readOctets = express.raw({ type: 'application/octet-stream', limit: CHUNK_MAX_BYTES, inflate: false });
const skip: RequestHandler = (_request, _response, next) => next();
const READERS: Readonly<Record<Route['body'], RequestHandler>> = { none: skip, json: readJson, octets: readOctets };

/** All routes, each with its body reader: who asks is settled before a body is read, so that strangers upload nothing. */
export function apiRouter(deps: ServiceDeps, cookie: CookieOptions): Router {
  const router = Router();
  for (const route of ALL_ROUTES) {
    const identify: RequestHandler = async (request, response, next) => {
      response.locals['actor'] = await actorOf(route, deps, cookie, request.get('authorization'), request.get('cookie'));
      next();
    };
    const handle: RequestHandler = async (request, response) => {
      const actor = response.locals['actor'] as Actor;
      const call: Call = { ctx: { ...deps, actor }, request, response, cookie };
      const reply = await route.handle(call);
      if ('sent' in reply) return;
      if ('json' in reply) response.status(reply.status).json(reply.json);
      else response.status(reply.status).end();
    };
    router[route.method](route.path, identify, READERS[route.body], handle);
  }
  return router;
}

/** A grant counts only where the permission table lets one act; elsewhere the header is not looked at. */
async function actorOf(route: Route, deps: ServiceDeps, cookie: CookieOptions, authorization?: string, cookies?: string): Promise<Actor> {
  if (route.access === 'public') return { kind: 'anonymous' };
  const takesGrant = route.access !== 'signed in' && PERMISSIONS[route.access].grant;
  const bearer = takesGrant ? readBearer(authorization) : undefined;
  const actor = bearer === undefined ? await identifyByCookie(deps, readAuthCookie(cookies, cookie)) : await identifyByGrant(deps, bearer);
  if (actor.kind === 'anonymous') throw new ServiceError('SIGN_IN_REQUIRED', 'Sign in first.');
  return actor;
}
