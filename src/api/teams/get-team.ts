import { queryOptions } from '@tanstack/react-query';
import { teamResponseSchema } from '#shared/api/teams.ts';
import { keys } from '#src/api/query-keys.ts';
import { request } from '#src/api/request.ts';

export const teamQuery = (userId: string, teamId: string) =>
  queryOptions({
    queryKey: keys.team(userId, teamId),
    queryFn: ({ signal }) => request(teamResponseSchema, `/teams/${teamId}`, { signal }),
  });
