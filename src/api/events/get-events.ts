import { queryOptions } from '@tanstack/react-query';
import { eventsResponseSchema } from '#shared/api/events.ts';
import { keys } from '#src/api/query-keys.ts';
import { request } from '#src/api/request.ts';

export const eventsQuery = (userId: string, teamId: string) =>
  queryOptions({
    queryKey: keys.events(userId, teamId),
    queryFn: ({ signal }) => request(eventsResponseSchema, `/teams/${teamId}/events`, { signal }),
  });
