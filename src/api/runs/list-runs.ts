import { queryOptions } from '@tanstack/react-query';
import { runsResponseSchema } from '#shared/api/runs.ts';
import { keys } from '#src/api/query-keys.ts';
import { request } from '#src/api/request.ts';

export const runsQuery = (userId: string, teamId: string) =>
  queryOptions({
    queryKey: keys.runs(userId, teamId),
    queryFn: ({ signal }) => request(runsResponseSchema, `/teams/${teamId}/runs`, { signal }),
  });
