import type { FromSerialWorker, ToSerialWorker } from './serial-messages.ts';

/**
 * Finds what to add to the worker's stamps to have the page's. Both tick alike and start apart; `timeOrigin` is no bridge,
 * as it is read off a clock that can be stepped. The exchange with the least round trip counts: its error is at most half
 * of it, a fraction of a millisecond.
 */
export interface SerialExchange {
  /** Asks `times` times, one after the other, and keeps the best of all so far. */
  measure(times: number): Promise<void>;
  /** Gives the worker's answers back. */
  answer(message: Extract<FromSerialWorker, { type: 'stamp' }>): void;
  /** Page stamp less worker stamp, ms; null before the first answer. */
  readonly offset: number | null;
}

/** @param pageStamp the page's stamp now, ms */
export function createSerialExchange(pageStamp: () => number, post: (message: ToSerialWorker) => void): SerialExchange {
  let best: { readonly offset: number; readonly roundTrip: number } | null = null;
  let waiting: { readonly id: number; readonly sent: number; readonly answered: () => void } | null = null;
  let nextId = 0;

  const ask = (): Promise<void> =>
    new Promise((answered) => {
      waiting = { id: nextId++, sent: pageStamp(), answered };
      post({ type: 'probe', id: waiting.id });
    });

  return {
    async measure(times) {
      for (let i = 0; i < times; i += 1) await ask();
    },
    answer({ id, stamp }) {
      if (waiting === null || waiting.id !== id) return;
      const received = pageStamp();
      const roundTrip = received - waiting.sent;
      if (best === null || roundTrip < best.roundTrip) best = { offset: (waiting.sent + received) / 2 - stamp, roundTrip };
      waiting.answered();
      waiting = null;
    },
    get offset() {
      return best?.offset ?? null;
    },
  };
}
