import { createContext, useContext } from 'react';
import type { ChunkStore } from '#src/storage/chunk-store.ts';
import type { JournalStore } from '#src/storage/journal-store.ts';
import type { PackStore } from '#src/storage/pack-store.ts';

/** This device's storage as the paddock uses it. */
export interface DeviceStorage {
  readonly journals: JournalStore;
  readonly packs: PackStore;
  readonly chunks: ChunkStore;
  /** Calls back with what `read` finds, now and whenever any window of this device changes it. Call the result to end it. */
  watch<T>(read: () => Promise<T>, changed: (value: T) => void): () => void;
}

export type DeviceState =
  | { readonly state: 'opening' }
  | { readonly state: 'open'; readonly storage: DeviceStorage }
  | { readonly state: 'failed'; readonly message: string };

export const DeviceContext = createContext<DeviceState>({ state: 'opening' });

export const useDevice = (): DeviceState => useContext(DeviceContext);
