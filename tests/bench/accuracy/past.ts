/** Values by instant, read between by straight line. */
export interface Past {
  add(at: number, value: number): void;
  /** Beyond the last instant: carried on as it went over the last half second at least. */
  at(instant: number): number;
  /** Mean change per second over the half second before. */
  rateAt(instant: number): number;
}

const KEPT_US = 10e6;
const RATE_US = 500_000;

export function makePast(): Past {
  let points: { at: number; value: number }[] = [];
  const past: Past = {
    add(at, value) {
      const last = points[points.length - 1];
      if (last !== undefined && at <= last.at) return;
      points.push({ at, value });
      if (points.length > 2000) points = points.filter((p) => p.at > at - KEPT_US);
    },
    at(instant) {
      const last = points[points.length - 1];
      if (last === undefined) return 0;
      if (instant >= last.at) return last.value + (past.rateAt(last.at) * (instant - last.at)) / 1e6;
      let i = points.length - 2;
      while (i > 0 && (points[i] as { at: number }).at > instant) i--;
      const [a, b] = [points[Math.max(0, i)] ?? last, points[Math.max(0, i) + 1] ?? last];
      if (instant <= a.at || b.at === a.at) return a.value;
      return a.value + ((b.value - a.value) * (instant - a.at)) / (b.at - a.at);
    },
    rateAt(instant) {
      const first = points[0];
      if (first === undefined || instant - RATE_US < first.at) return 0;
      const last = points[points.length - 1] as { at: number; value: number };
      const to = Math.min(instant, last.at);
      return ((past.at(to - 1) - past.at(to - RATE_US)) * 1e6) / (RATE_US - 1);
    },
  };
  return past;
}
