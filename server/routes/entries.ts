import { setCockpitSettings } from '#server/services/entries/set-cockpit-settings.ts';
import { setCountingRun } from '#server/services/entries/set-counting-run.ts';
import { revokeGrants } from '#server/services/packs/revoke-grants.ts';
import { cockpitSettingsRequestSchema, setCountingRunRequestSchema } from '#shared/api/entries.ts';
import { answer, idParam, parseBody, type Route } from './route.ts';

export const entryRoutes: readonly Route[] = [
  {
    method: 'patch',
    path: '/entries/:id/cockpit-settings',
    access: 'cockpit-settings.set',
    body: 'json',
    async handle({ ctx, request }) {
      const settings = parseBody(cockpitSettingsRequestSchema, request);
      return answer(await setCockpitSettings(ctx, idParam(request, 'id'), settings));
    },
  },
  {
    method: 'post',
    path: '/entries/:id/counting-run',
    access: 'counting-run.set',
    body: 'json',
    async handle({ ctx, request }) {
      const { runId } = parseBody(setCountingRunRequestSchema, request);
      return answer(await setCountingRun(ctx, idParam(request, 'id'), runId));
    },
  },
  {
    method: 'post',
    path: '/entries/:id/revoke-grants',
    access: 'pack.load',
    body: 'json',
    handle: async ({ ctx, request }) => answer({ revoked: await revokeGrants(ctx, idParam(request, 'id')) }),
  },
];
