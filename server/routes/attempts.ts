import { setRelease } from '#server/services/attempts/set-release.ts';
import { loadPack } from '#server/services/packs/load-pack.ts';
import { setReleaseRequestSchema } from '#shared/api/attempts.ts';
import { answer, idParam, parseBody, type Route } from './route.ts';

export const attemptRoutes: readonly Route[] = [
  {
    method: 'patch',
    path: '/attempts/:id',
    access: 'release.set',
    body: 'json',
    handle: async ({ ctx, request }) => answer(await setRelease(ctx, idParam(request, 'id'), parseBody(setReleaseRequestSchema, request))),
  },
  {
    method: 'post',
    path: '/attempts/:id/pack',
    access: 'pack.load',
    body: 'json',
    handle: async ({ ctx, request }) => answer(await loadPack(ctx, idParam(request, 'id'))),
  },
];
