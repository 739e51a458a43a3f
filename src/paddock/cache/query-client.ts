import { MutationCache, onlineManager, QueryCache, QueryClient } from '@tanstack/react-query';
import { ApiError, hasCode } from '#src/api/api-error.ts';
import { keys } from '#src/api/query-keys.ts';
import { believesOnline } from '#src/sync/connection.ts';

const MOST_RETRIES = 2;
/** Kept answers outlive a weekend away from any network. */
export const KEEP_FOR_MS = 14 * 24 * 3_600_000;

/** Answers with a code of ours are final; only a lost or foreign answer is worth asking again. */
function worthRetrying(failures: number, error: Error): boolean {
  return error instanceof ApiError && (error.code === 'NETWORK' || error.code === 'BUSY') && failures < MOST_RETRIES;
}

export function createQueryClient(): QueryClient {
  onlineManager.setOnline(believesOnline());
  const client: QueryClient = new QueryClient({
    defaultOptions: { queries: { retry: worthRetrying, staleTime: 10_000, gcTime: KEEP_FOR_MS }, mutations: { networkMode: 'always' } },
    queryCache: new QueryCache({ onError: noticeEndedSignIn }),
    mutationCache: new MutationCache({ onError: noticeEndedSignIn }),
  });

  /** Only the server's own word ends a sign-in, never a lost reply. */
  function noticeEndedSignIn(error: Error): void {
    if (hasCode(error, 'SIGN_IN_REQUIRED')) client.setQueryData(keys.me, null);
  }
  return client;
}
