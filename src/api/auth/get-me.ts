import { queryOptions } from '@tanstack/react-query';
import { meResponseSchema } from '#shared/api/auth.ts';
import { keys } from '#src/api/query-keys.ts';
import { request } from '#src/api/request.ts';

/** Who is signed in. Kept offline: a lost connection never signs anybody out. */
export const meQuery = () =>
  queryOptions({ queryKey: keys.me, queryFn: ({ signal }) => request(meResponseSchema, '/auth/me', { signal }), staleTime: 60_000 });
