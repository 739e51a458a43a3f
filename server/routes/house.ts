import { checkDatabase } from '#server/services/house/check-database.ts';
import { VERSION } from '#server/version.ts';
import { ENGINE_VERSION } from '#shared/pace/run.ts';
import { answer, type Route } from './route.ts';

/** About the server itself: its clock, and whether it is well. */
export const houseRoutes: readonly Route[] = [
  {
    method: 'get',
    path: '/time',
    access: 'public',
    body: 'none',
    // t2 is stamped when the request arrives, before anything else is done with it.
    handle: async ({ ctx, response }) => answer({ t2: response.locals['arrivedMs'], t3: ctx.now() }),
  },
  {
    method: 'get',
    path: '/health',
    access: 'public',
    body: 'none',
    async handle({ ctx }) {
      await checkDatabase(ctx);
      return answer({ status: 'ok', version: VERSION, engine: ENGINE_VERSION });
    },
  },
];
