import { queryOptions } from '@tanstack/react-query';
import { runResponseSchema } from '#shared/api/runs.ts';
import { keys } from '#src/api/query-keys.ts';
import { request } from '#src/api/request.ts';

const LOOK_AGAIN_MS = 2_000;

/** Looks again while the server still derives the run sheet. */
export const runQuery = (userId: string, runId: string) =>
  queryOptions({
    queryKey: keys.run(userId, runId),
    queryFn: ({ signal }) => request(runResponseSchema, `/runs/${runId}`, { signal }),
    refetchInterval: ({ state }) => (state.data?.run.status === 'computing' ? LOOK_AGAIN_MS : false),
  });
