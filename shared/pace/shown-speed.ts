import { metresPerSecondPer, type SpeedUnit } from '#shared/units.ts';

/** A speed as the driver is shown it. */

/** Steps of the shown speed in the crew's unit: 2 km/h or 1 mph. */
const stepOf = (unit: SpeedUnit): number => (unit === 'km/h' ? 2 : 1);

/** One such step, m/s. */
export const shownStep = (unit: SpeedUnit): number => stepOf(unit) * metresPerSecondPer(unit);

/**
 * A speed in the crew's steps, never above `upper`, never below `lower` (upper wins). Where a bound itself is the advice, it is
 * shown to the whole unit instead of the step.
 */
export function shownSpeed(wanted: number, upper: number, lower: number, unit: SpeedUnit): number {
  const per = metresPerSecondPer(unit);
  const step = stepOf(unit);
  const dust = 1e-6;
  const most = Math.floor(upper / per + dust);
  let shown = Math.round(wanted / per / step) * step;
  if (wanted >= upper - dust) shown = most;
  else if (shown > most) shown = Math.floor(upper / per / step + dust) * step;
  if (shown < lower / per - dust) shown = Math.min(most, Math.ceil(lower / per - dust));
  return shown * per;
}
