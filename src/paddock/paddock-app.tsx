import { PersistQueryClientProvider } from '@tanstack/react-query-persist-client';
import { StrictMode } from 'react';
import { createRoot } from 'react-dom/client';
import { RouterProvider } from 'react-router';
import { meResponseSchema } from '#shared/api/auth.ts';
import { keys } from '#src/api/query-keys.ts';
import { createOfflineCache, mayKeep } from './cache/offline-cache.ts';
import { createQueryClient, KEEP_FOR_MS } from './cache/query-client.ts';
import { DeviceProvider } from './device/device-provider.tsx';
import { createRouter } from './routes.tsx';

/** Answers kept by another shape of the code are thrown away; raise it when an answer's shape changes. */
const CACHE_SHAPE = '1';

/** Draws the paddock: everything outside the car. */
export function mount(element: HTMLElement): void {
  const client = createQueryClient();
  const userId = () => meResponseSchema.safeParse(client.getQueryData(keys.me)).data?.user.id ?? null;
  const persistOptions = {
    persister: createOfflineCache(localStorageIfAllowed()),
    maxAge: KEEP_FOR_MS,
    buster: CACHE_SHAPE,
    dehydrateOptions: {
      shouldDehydrateQuery: (query: Parameters<typeof mayKeep>[0]) => mayKeep(query, userId()),
      shouldDehydrateMutation: () => false,
    },
  };
  createRoot(element).render(
    <StrictMode>
      <PersistQueryClientProvider client={client} persistOptions={persistOptions}>
        <DeviceProvider>
          <RouterProvider router={createRouter()} />
        </DeviceProvider>
      </PersistQueryClientProvider>
    </StrictMode>,
  );
}

/** A browser that refuses storage still has a paddock, only none without a connection. */
function localStorageIfAllowed(): Storage | undefined {
  try {
    return window.localStorage;
  } catch {
    return undefined;
  }
}
