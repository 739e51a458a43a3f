import { createRandom, type Random } from '#shared/drive/random.ts';
import type { ClockV1 } from '#shared/journal/observation.ts';
import { type Clock, clockSigmaMs, makeClock, officialMsAt } from '#shared/pace/clock.ts';
import { offerClock, takePps } from '#shared/pace/clock-hear.ts';
import { exchangeResult, leastDelay } from '#src/run/official-clock.ts';

/** A device's crystal and the ways on which the official time reaches it: what the clock is measured against. Times in seconds, ms. */

/** Official unix ms at session second 0. */
export const EPOCH_MS = 1_800_000_000_000;

export interface Crystal {
  /** Official less session less EPOCH_MS, ms, at a session second; asked in order of time. */
  offsetAt(t: number): number;
}

/** Rate evenly spread over ±`ppm`, wandering by 0.15 ppm in a minute; another degree of warmth from `offlineAt` on: 1 ppm, one sigma. */
export function crystal(random: Random, ppm: number, offlineAt = Number.POSITIVE_INFINITY): Crystal {
  let rate = random.range(-ppm, ppm) / 1000;
  const warmth = random.gauss(0.001);
  let [now, offset] = [0, 0];
  return {
    offsetAt(t) {
      while (now < t) {
        const tau = Math.min(10, t - now);
        offset += (rate + (now >= offlineAt ? warmth : 0)) * tau;
        rate += random.gauss(0.00015 * Math.sqrt(tau / 60));
        now += tau;
      }
      return offset;
    },
  };
}

export interface Way {
  /** One way without queues, ms; how much longer there than back (one sigma); mean queue each way. */
  readonly base: number;
  readonly asymmetry: number;
  readonly queue: number;
}

export const WAYS = {
  'Wi-Fi': { base: 2, asymmetry: 0.8, queue: 1 },
  '4G': { base: 25, asymmetry: 8, queue: 15 },
  'poor 4G': { base: 60, asymmetry: 25, queue: 50 },
} as const satisfies Record<string, Way>;

export const waiting = (random: Random, mean: number): number => -mean * Math.log(1 - random.unit());

/** Sixteen exchanges over one way; `skew` is how much longer it is there than back. True offset 0. */
export function exchanges(random: Random, way: Way, skew: number) {
  return Array.from({ length: 16 }, () => {
    const there = Math.max(0.5, way.base + skew / 2) + waiting(random, way.queue);
    const back = Math.max(0.5, way.base - skew / 2) + waiting(random, way.queue);
    return exchangeResult({ t1: 0, t2: there, t3: there + 0.3, t4: there + 0.3 + back });
  });
}

/** Sentences' lateness beyond their constant latency: 16 ms of polling, a queue of 10 ms, a busy device now and then. */
export const sentenceJitter = (random: Random): number =>
  random.range(0, 16) + waiting(random, 10) + (random.unit() < 0.05 ? random.range(20, 300) : 0);

/** A clock of the engine's, fed as a run feeds it; not released. */
export class Fed {
  readonly clock: Clock = makeClock();

  offer(t: number, source: ClockV1['source'], officialMs: number, uncertaintyMs: number): void {
    offerClock(this.clock, { type: 'clock.v1', seq: 0, at: Math.round(t * 1e6), source, officialMs, uncertaintyMs }, t * 1e6, false);
  }

  exchange(random: Random, way: Way, skew: number, t: number, offset: number): void {
    const best = leastDelay(exchanges(random, way, skew));
    if (best !== null) this.offer(t, 'exchange', EPOCH_MS + t * 1000 + offset + best.offset, best.sigma);
  }

  edge(t: number, lateMs: number): void {
    const at = Math.round(t * 1e6 + lateMs * 1000);
    takePps(this.clock, at, at, false);
  }

  /** Error of the official clock shown, and one sigma of it, ms. */
  errorAt(t: number, offset: number): { readonly error: number; readonly sigma: number } {
    const { chosen } = this.clock;
    if (chosen === null) throw new Error('nothing has told the official clock');
    return { error: officialMsAt(chosen, t * 1e6) - (EPOCH_MS + t * 1000 + offset), sigma: clockSigmaMs(this.clock, t * 1e6) };
  }
}

/** Session second at which the official clock's whole second `k` begins. */
export const secondBegins = (k: number, offset: number): number => k - offset / 1000;

export interface Tally {
  add(error: number, sigma?: number): void;
  readonly rms: number;
  readonly p95: number;
  /** Share within two stated sigma, %. */
  readonly covered: number;
}

export function tally(): Tally {
  const errors: number[] = [];
  let within = 0;
  return {
    add(error, sigma = Number.NaN) {
      errors.push(Math.abs(error));
      if (Math.abs(error) <= 2 * sigma) within += 1;
    },
    get rms() {
      return Math.sqrt(errors.reduce((sum, e) => sum + e * e, 0) / errors.length);
    },
    get p95() {
      return errors.toSorted((a, b) => a - b)[Math.floor(0.95 * errors.length)] as number;
    },
    get covered() {
      return (100 * within) / errors.length;
    },
  };
}

export const randomOf = (name: string, i: number): Random => createRandom(20_260_601 + i, name);
