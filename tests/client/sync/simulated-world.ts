/**
 * Virtual time and the lives of a client. Every await of the client passes through `pause`, where a life may end: its
 * promise then never settles, as when a page is killed. Seeded, so that a failing seed can be run again.
 */
export interface SimulatedWorld {
  random(): number;
  /** Virtual milliseconds since the world began. */
  now(): number;
  pause(life: Life, ms: number): Promise<void>;
  /** Runs until `done` says so or nothing is left to do. Returns false if it had to give up. */
  play(done: () => boolean, betweenEvents: () => void): Promise<boolean>;
}

export interface Life {
  alive: boolean;
}

interface Waiting {
  readonly at: number;
  readonly order: number;
  readonly resume: () => void;
}

const MOST_EVENTS = 20_000;

export function createWorld(seed: number): SimulatedWorld {
  const random = seeded(seed);
  const waiting: Waiting[] = [];
  let now = 0;
  let order = 0;

  return {
    random,
    now: () => now,
    pause: (life, ms) =>
      new Promise((resolve) => {
        const resume = () => {
          if (life.alive) resolve();
        };
        waiting.push({ at: now + ms, order: order++, resume });
      }),
    play: async (done, betweenEvents) => {
      for (let i = 0; i < MOST_EVENTS; i++) {
        await settled();
        if (done()) return true;
        betweenEvents();
        const next = takeEarliest(waiting);
        if (next === undefined) return false;
        now = Math.max(now, next.at);
        next.resume();
      }
      return false;
    },
  };
}

/** A macrotask later every microtask has run. */
const settled = (): Promise<void> => new Promise((resolve) => setImmediate(resolve));

function takeEarliest(waiting: Waiting[]): Waiting | undefined {
  let best = 0;
  for (let i = 1; i < waiting.length; i++) {
    const a = waiting[i] as Waiting;
    const b = waiting[best] as Waiting;
    if (a.at < b.at || (a.at === b.at && a.order < b.order)) best = i;
  }
  return waiting.splice(best, 1)[0];
}

/** mulberry32, a public-domain generator of 32 bits (from memory). */
function seeded(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4_294_967_296;
  };
}
