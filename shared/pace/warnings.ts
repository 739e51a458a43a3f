import { zoneAt } from '#shared/pace/course-model.ts';
import { nextIndex } from '#shared/pace/next-checkpoint.ts';
import type { Warning } from '#shared/pace/readout.ts';
import type { RunState } from '#shared/pace/run-state.ts';
import type { Situation } from '#shared/pace/situation.ts';

/** What the crew should know at an instant, beyond the figures. */

/** Over a limit by less than this is measurement, m/s. */
const TOLERANCE = 0.3;
/** How long the crew is told of what the wheel's sensor did. */
const TOLD_US = 8_000_000;
const WHEEL_SILENT_US = 2_000_000;
const GNSS_SILENT_US = 3_000_000;
/** A hairpin makes one wheel err by more than a metre: less than this is no news. */
const WORTH_TELLING_M = 3;
/** How long the crew is told of clocks that came apart. */
const SLEPT_US = 60_000_000;
/** How long the crew is told that a source of the official clock contradicted the others. */
const DISAGREES_US = 120_000_000;

export function warningsAt(state: RunState, s: Situation): Warning[] {
  const warnings: Warning[] = [];
  const moving = s.phase === 'running' || s.phase === 'stopped';
  if (wheelLost(state, s)) warnings.push({ code: 'wheel-lost' });
  warnings.push(...wheelWarnings(state, s));
  const gripped = grip(state);
  if (gripped !== null) warnings.push({ code: gripped });
  const { handedBack } = state.odometer;
  if (handedBack !== null && s.at - handedBack.at < TOLD_US) {
    const moved = (handedBack.counts * s.mmPerPulse) / 1000 - handedBack.metres;
    if (Math.abs(moved) >= WORTH_TELLING_M) warnings.push({ code: 'wheel-back', moved });
  }
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

/** What the wheel's sensor misses now, or did a moment ago, and what its neighbour says of it. */
function wheelWarnings({ odometer: { fills, gap, second } }: RunState, { at }: Situation): Warning[] {
  const isRecent = (then: number | null): boolean => then !== null && at - then < TOLD_US;
  const warnings: Warning[] = [];
  if (second.standing !== null) warnings.push({ code: 'second-wheel' });
  else if (gap.phase === 'open' || isRecent(fills.at)) warnings.push({ code: 'pulses-filled' });
  if (second.pair.disagree || isRecent(second.pair.disagreedAt)) warnings.push({ code: 'wheels-disagree' });
  return warnings;
}

/** The class permits the wheel, it was there, and it is not the source now though the car moves or the port is gone. */
function wheelLost(state: RunState, s: Situation): boolean {
  const { odometer, acts } = state;
  if (!odometer.usedWheel) return false;
  if (acts.sensorLostAt !== null && acts.sensorLostAt >= odometer.wheel.at) return true;
  return odometer.mode === 'gnss' || (s.source === 'none' && (odometer.gap.phase === 'lost' || s.at - odometer.wheel.at > WHEEL_SILENT_US));
}

/** The wheel counts more than the car drives, or less: distance follows GNSS meanwhile. */
function grip({ odometer }: RunState): 'wheel-slipping' | 'wheel-losing' | null {
  const { active } = odometer.comparison.slip;
  if (active === null || odometer.mode !== 'wheel' || Math.abs(active.metres) < WORTH_TELLING_M) return null;
  return active.metres < 0 ? 'wheel-slipping' : 'wheel-losing';
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
