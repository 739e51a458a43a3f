/**
 * Which positions of the browser count: none out of order, none over two seconds old. Position stamps come from the
 * satellites on some devices, and the tablet's own clock may be seconds out: where several fixes in a row are all old by
 * nearly the same amount, that amount is the clock's fault and is taken off.
 */
export interface FixFreshness {
  /** Age of the fix in ms, 0 or more, or null where it must be dropped. Both in unix ms of the wall clock. */
  age(stampMs: number, nowMs: number): number | null;
}

const MAX_AGE_MS = 2000;
const IN_A_ROW = 5;

export function createFixFreshness(): FixFreshness {
  let last = Number.NEGATIVE_INFINITY;
  let clockError = 0;
  let dropped: number[] = [];

  const learn = (age: number): void => {
    dropped = [...dropped.slice(1 - IN_A_ROW), age];
    const least = Math.min(...dropped);
    if (dropped.length === IN_A_ROW && Math.max(...dropped) - least < MAX_AGE_MS) clockError = least;
  };

  return {
    age(stampMs, nowMs) {
      if (stampMs <= last) return null;
      last = stampMs;
      const raw = nowMs - stampMs;
      const age = Math.max(0, raw - clockError);
      if (age > MAX_AGE_MS) {
        learn(raw);
        return null;
      }
      dropped = [];
      return age;
    },
  };
}
