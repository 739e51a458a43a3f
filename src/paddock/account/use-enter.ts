import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useLocation, useNavigate } from 'react-router';
import type { MeResponse } from '#shared/api/auth.ts';
import { keys } from '#src/api/query-keys.ts';
import { useOutbox } from '#src/paddock/device/outbox-context.ts';

/** Signing in or up: whatever another person left in the cache goes first, then back to where the person was going. */
export function useEnter<Request>(enter: (request: Request) => Promise<MeResponse>) {
  const client = useQueryClient();
  const navigate = useNavigate();
  const outbox = useOutbox();
  const from = comingFrom(useLocation().state);
  return useMutation({
    mutationFn: enter,
    onSuccess: async (me) => {
      client.clear();
      client.setQueryData(keys.me, me);
      outbox?.retryBlocked();
      await navigate(from, { replace: true });
    },
  });
}

const comingFrom = (state: unknown): string =>
  typeof state === 'object' && state !== null && 'from' in state && typeof state.from === 'string' ? state.from : '/event';
