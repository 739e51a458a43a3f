import type { JournalStore } from './journal-store.ts';

/** Tells every window of this device that what is stored here changed; what changed, they read for themselves. */
const CHANNEL = 'evenline-storage';
/** A run under way commits four blocks a second; nobody needs to hear of each. */
const AT_MOST_EVERY_MS = 500;

const CHANGING = [
  'createRun',
  'append',
  'removeRun',
  'putPack',
  'removePack',
  'progress',
] as const satisfies readonly (keyof JournalStore)[];

/** The same store, heard of by whoever watches. */
export function announcing(store: JournalStore): JournalStore {
  const announce = throttledAnnouncer();
  const told = CHANGING.map((name) => {
    const change = store[name] as (...args: readonly unknown[]) => Promise<unknown>;
    const andTell = async (...args: readonly unknown[]): Promise<unknown> => {
      const answer = await change(...args);
      announce();
      return answer;
    };
    return [name, andTell];
  });
  return { ...store, ...(Object.fromEntries(told) as Partial<JournalStore>) };
}

/** Calls back after changes made by any window or worker of this device. Call the result to end it. */
export function watchChanges(changed: () => void): () => void {
  const channel = new BroadcastChannel(CHANNEL);
  channel.onmessage = () => changed();
  return () => channel.close();
}

function throttledAnnouncer(): () => void {
  const channel = new BroadcastChannel(CHANNEL);
  let timer: ReturnType<typeof setTimeout> | null = null;
  let again = false;
  const tell = (): void => {
    channel.postMessage('changed');
    again = false;
    timer = setTimeout(() => {
      timer = null;
      if (again) tell();
    }, AT_MOST_EVERY_MS);
  };
  return () => {
    if (timer === null) tell();
    else again = true;
  };
}
