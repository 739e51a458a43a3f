import type { Journalled } from '#shared/journal/block.ts';
import type { ClockPairV1, EpochV1, NewObservation } from '#shared/journal/observation.ts';
import { type Micros, micros } from '#shared/units.ts';
import { aheadMs, type DeviceClocks, type SessionClock } from './clock.ts';

/** Lives of the page, and how the session clock gets from one to the next. */

export interface LastLife {
  /** Number of the latest epoch; -1 before any. */
  readonly n: number;
  /** The latest reading of the wall clock beside the session clock. */
  readonly pair: { readonly at: number; readonly wall: number } | null;
  /** Latest instant of anything. */
  readonly latestAt: number;
}

export const NO_LIFE: LastLife = { n: -1, pair: null, latestAt: 0 };

/** Nobody knows what was done to the wall clock while the page was away: judgement, one sigma, ms. */
export const WALL_BRIDGE_MS = 50;

export function followLife(life: LastLife, o: Journalled): LastLife {
  const latestAt = Math.max(life.latestAt, o.at);
  if (o.type !== 'epoch.v1' && o.type !== 'clock-pair.v1') return latestAt === life.latestAt ? life : { ...life, latestAt };
  const { at, wall } = o as EpochV1 | ClockPairV1;
  return { n: o.type === 'epoch.v1' ? (o as EpochV1).n : life.n, pair: { at, wall }, latestAt };
}

/**
 * The session instant now, carried over by the wall clock: what passed on the wall since the last pair, at the session's rate.
 * Never before anything journalled: a wall clock that was set back meanwhile must not send the run back.
 */
export function bridgedByWall(life: LastLife, clocks: DeviceClocks, rate: number): Micros {
  if (life.pair === null) return micros(life.latestAt);
  const passedMs = clocks.wall() - (life.pair.wall - aheadMs(life.pair.at, rate));
  return micros(Math.max(life.latestAt, life.pair.at + passedMs * 1000 * rate));
}

export function epochNow(clock: SessionClock, n: number, bridgedBy: EpochV1['bridgedBy'], uncertaintyMs: number): NewObservation {
  return { type: 'epoch.v1', ...clock.reading(), n, bridgedBy, uncertaintyMs };
}
