import { isLaunching, watchLaunch } from '#shared/pace/launch.ts';
import type { Odometer, OdometerChange } from '#shared/pace/odometer.ts';
import { addKnot } from '#shared/pace/track.ts';

/** Nothing moved, or moved as it does a hundred times a second: one value for all, never written to. */
export const UNREMARKABLE: OdometerChange = { traced: false, launch: 'none', rewritten: null, node: false };

/** Raw values at an instant, by whichever source is in charge. */
export function knot(
  o: Odometer,
  at: number,
  w: number,
  g: number,
  metresPerPulse: number,
  rewritten: OdometerChange['rewritten'] = null,
): OdometerChange {
  o.w = w;
  o.g = g;
  const byWheel = o.mode === 'wheel';
  const pulseMetres = byWheel ? metresPerPulse : 0;
  const launch = watchLaunch(o.launches, at, w * metresPerPulse + g, w, g, o.stillAt, pulseMetres, byWheel ? o.wheel.since : 0);
  const traced = addKnot(o.track, at, w, g, isLaunching(o.launches) || launch !== 'none');
  return traced || launch !== 'none' || rewritten !== null ? { traced, launch, rewritten, node: false } : UNREMARKABLE;
}

/** The end of a standstill becomes a knot, or a straight line would have the car creep all the while. */
export function keepStill(o: Odometer): void {
  const last = o.track.recent.at[o.track.recent.at.length - 1];
  if (last !== undefined && o.stillAt > last) addKnot(o.track, o.stillAt, o.w, o.g, false);
}
