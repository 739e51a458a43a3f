import type { NewObservation } from '#shared/journal/observation.ts';

/** Gathers the worker's observations into one message for at most `BATCH_MS`; a wired button goes at once. */
export interface SerialOutbox {
  add(observations: readonly NewObservation[]): void;
  flush(): void;
}

const BATCH_MS = 50;

export function createSerialOutbox(post: (observations: readonly NewObservation[]) => void): SerialOutbox {
  let waiting: NewObservation[] = [];
  let timer: ReturnType<typeof setTimeout> | null = null;

  const flush = (): void => {
    if (timer !== null) clearTimeout(timer);
    timer = null;
    const batch = waiting;
    waiting = [];
    if (batch.length > 0) post(batch);
  };

  return {
    add(observations) {
      if (observations.length === 0) return;
      waiting.push(...observations);
      if (observations.some((o) => o.type === 'button.v1')) flush();
      else timer ??= setTimeout(flush, BATCH_MS);
    },
    flush,
  };
}
