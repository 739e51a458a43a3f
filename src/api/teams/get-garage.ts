import { queryOptions } from '@tanstack/react-query';
import { garageResponseSchema } from '#shared/api/teams.ts';
import { keys } from '#src/api/query-keys.ts';
import { request } from '#src/api/request.ts';

export const garageQuery = (userId: string, teamId: string) =>
  queryOptions({
    queryKey: keys.garage(userId, teamId),
    queryFn: ({ signal }) => request(garageResponseSchema, `/teams/${teamId}/garage`, { signal }),
  });
