import { zoneAt } from '#shared/pace/course-model.ts';
import { nextIndex } from '#shared/pace/next-checkpoint.ts';
import type { Warning } from '#shared/pace/readout.ts';
import type { RunState } from '#shared/pace/run-state.ts';
import type { Situation } from '#shared/pace/situation.ts';

/** What the crew should know at an instant, beyond the figures. */

/** Over a limit by less than this is measurement, m/s. */
const TOLERANCE = 0.3;
const WHEEL_SILENT_US = 2_000_000;
const GNSS_SILENT_US = 3_000_000;
/** How long the crew is told of clocks that came apart. */
const SLEPT_US = 60_000_000;
/** How long the crew is told that a source of the official clock contradicted the others. */
const DISAGREES_US = 120_000_000;

export function warningsAt(state: RunState, s: Situation): Warning[] {
  const warnings: Warning[] = [];
  const moving = s.phase === 'running' || s.phase === 'stopped';
  if (wheelLost(state, s)) warnings.push({ code: 'wheel-lost' });
  if (gnssLost(state, s)) warnings.push({ code: 'gnss-lost' });
  if (moving && s.source === 'none') warnings.push({ code: 'no-distance' });
  const clock = state.clock.chosen?.source;
  if (clock === undefined || clock === 'wall' || clock === 'device') warnings.push({ code: 'clock-unchecked' });
  const zone = zoneAt(s.model, s.distance);
  if (moving && s.speed !== null && zone !== null && s.speed > zone.limit + TOLERANCE) warnings.push({ code: 'over-limit' });
  if (moving && s.speed !== null && s.model.cap !== null && s.speed > s.model.cap + TOLERANCE) warnings.push({ code: 'over-cap' });
  if (state.unknownTypes.length > 0) warnings.push({ code: 'newer-evenline' });
  const { slept, asleep, doubts } = state.clock;
  const last = slept[slept.length - 1];
  if (asleep !== null || (last !== undefined && s.at - last.at < SLEPT_US)) warnings.push({ code: 'slept' });
  if (doubts.some((d) => s.at - d.at < DISAGREES_US)) warnings.push({ code: 'clock-disagrees' });
  const missed = missedPlace(state, s);
  if (moving && missed !== null) warnings.push({ code: 'checkpoint-missed', checkpoint: missed });
  return warnings;
}

/** The class permits the wheel, it was there, and it is not the source now though the car moves or the port is gone. */
function wheelLost(state: RunState, s: Situation): boolean {
  const { odometer, acts } = state;
  if (!odometer.usedWheel) return false;
  if (acts.sensorLostAt !== null && acts.sensorLostAt >= odometer.wheel.at) return true;
  return odometer.mode === 'gnss' || (s.source === 'none' && s.at - odometer.wheel.at > WHEEL_SILENT_US);
}

function gnssLost(state: RunState, s: Situation): boolean {
  const { gnss, mode } = state.odometer;
  return mode === 'gnss' && gnss.last !== null && s.at - gnss.last.at > GNSS_SILENT_US;
}

/** A place passed without a touch, while a late touch is still offered. */
function missedPlace(state: RunState, s: Situation): string | null {
  const index = nextIndex(state, s);
  if (index === null) return null;
  const place = s.model.places[index] as (typeof s.model.places)[number];
  return state.derived.passings[index]?.by === 'distance' && s.distance > place.d ? place.checkpoint.id : null;
}
