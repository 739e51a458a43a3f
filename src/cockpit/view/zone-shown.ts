import type { Readout, ZoneAhead } from '#shared/pace/readout.ts';

/** A limit comes into sight this long before it begins, but never nearer than this. */
const SIGHT_S = 25;
const SIGHT_LEAST_M = 800;

/** The limit to show: the one in force, else the next one once it is near. */
export function zoneShown({ zone, zoneAhead, speed }: Pick<Readout, 'zone' | 'zoneAhead' | 'speed'>): ZoneAhead | null {
  if (zone !== null) return zone;
  return zoneAhead !== null && zoneAhead.startsIn <= Math.max(SIGHT_LEAST_M, SIGHT_S * (speed ?? 0)) ? zoneAhead : null;
}
