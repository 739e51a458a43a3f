import type { Aids } from '#shared/course/race-class.ts';
import type { PulseV1 } from '#shared/journal/observation.ts';
import { type Gnss, gnssMetresAt, makeGnss } from '#shared/pace/gnss.ts';
import { handBack, noteGnss } from '#shared/pace/gnss-source.ts';
import { type LaunchEvent, type LaunchWatch, makeLaunchWatch } from '#shared/pace/launch.ts';
import { keepStill, knot, UNREMARKABLE } from '#shared/pace/odometer-knot.ts';
import { makeSourceComparison, type SourceComparison } from '#shared/pace/source-comparison.ts';
import type { SourceNode } from '#shared/pace/source-node.ts';
import { makeSecondLook, type SecondLook } from '#shared/pace/source-nodes.ts';
import { makeTrack, rateNow, type Track } from '#shared/pace/track.ts';
import { makeWheelChannel, takeRecord, type WheelChannel } from '#shared/pace/wheel.ts';

/**
 * Raw distance from whatever is permitted and alive: the wheel's count first, GNSS where there is no wheel or it fell silent.
 * Knows nothing of checkpoints, scales or taps.
 */
export interface Odometer {
  mode: 'none' | 'wheel' | 'gnss';
  readonly wheel: WheelChannel;
  readonly gnss: Gnss;
  readonly track: Track;
  readonly launches: LaunchWatch;
  /** Raw values of the last knot. */
  w: number;
  g: number;
  /** Last knot by the wheel, and the count that stood there. */
  wheelKnot: { at: number; total: number };
  /** Last record of the source that showed no movement since the last knot. */
  stillAt: number;
  /** Where the wheel was left for GNSS: gMetres is GNSS's own reading there. Null when GNSS has been the source from the start. */
  bridge: { at: number; w: number; g: number; total: number } | null;
  /** GNSS's own reading less `g`, while GNSS is the source. */
  gnssZero: number;
  /** Distance that nothing measured, or only GNSS where the wheel slipped: instants and one sigma in metres. */
  losses: { at: number; sigma: number; by?: 'slip' }[];
  /** Comparisons with GNSS, in order of instant. */
  sourceNodes: SourceNode[];
  /** Where the comparing stands, and what it taught. */
  readonly secondLook: SecondLook;
  readonly comparison: SourceComparison;
  usedWheel: boolean;
  usedGnssSpeed: boolean;
  usedGnssPosition: boolean;
  bridges: number;
  /** Records of other channels. */
  otherRecords: number;
}

export interface OdometerChange {
  /** The trace grew. */
  readonly traced: boolean;
  readonly launch: LaunchEvent;
  /** Part of the past was told anew (bridged metres became counts). */
  readonly rewritten: { readonly from: number; readonly w: number; readonly g: number; readonly share: number } | null;
  /** A source node was added. */
  readonly node: boolean;
}

export const makeOdometer = (): Odometer => ({
  mode: 'none',
  wheel: makeWheelChannel(),
  gnss: makeGnss(),
  track: makeTrack(),
  launches: makeLaunchWatch(),
  w: 0,
  g: 0,
  wheelKnot: { at: 0, total: 0 },
  stillAt: 0,
  bridge: null,
  gnssZero: 0,
  losses: [],
  sourceNodes: [],
  secondLook: makeSecondLook(),
  comparison: makeSourceComparison(),
  usedWheel: false,
  usedGnssSpeed: false,
  usedGnssPosition: false,
  bridges: 0,
  otherRecords: 0,
});

/** Unchanged for longer than this is a rest. */
const RESTED_US = 700_000;

/** Takes a record of a wheel channel; only the measuring one counts. */
export function takePulse(o: Odometer, pulse: PulseV1, channel: number, aids: Aids, metresPerPulse: number): OdometerChange {
  if (!aids.wheel) return UNREMARKABLE;
  if (pulse.channel !== channel) {
    o.otherRecords++;
    return UNREMARKABLE;
  }
  const { wheel } = o;
  const before = wheel.at;
  const verdict = takeRecord(wheel, pulse, metresPerPulse);
  if (verdict === 'same' && o.mode === 'wheel') o.stillAt = wheel.at;
  if (verdict === 'held' || verdict === 'stale' || verdict === 'same') return UNREMARKABLE;
  o.usedWheel = true;
  if (o.mode === 'gnss') return handBack(o, verdict, metresPerPulse);
  if (verdict === 'restarted') return restart(o, before, metresPerPulse);
  o.mode = 'wheel';
  if (verdict === 'first') {
    o.wheelKnot = { at: wheel.at, total: wheel.total };
    return knot(o, wheel.at, o.w, o.g, metresPerPulse);
  }
  const pulses = wheel.total - o.wheelKnot.total;
  // one pulse more may have been on its way all the time; several were not, and neither was one after a rest
  if (Math.abs(pulses) > 1 || o.stillAt - o.wheelKnot.at > RESTED_US) keepStill(o);
  o.wheelKnot.at = wheel.at;
  o.wheelKnot.total = wheel.total;
  return knot(o, wheel.at, o.w + pulses, o.g, metresPerPulse);
}

/** The box restarted between two records, or another took over: GNSS may know the gap, else only what it has counted since is known. */
function restart(o: Odometer, before: number, metresPerPulse: number): OdometerChange {
  const { wheel, gnss } = o;
  const gap = (wheel.at - before) / 1e6;
  const from = Math.max(before, o.wheelKnot.at);
  const [g0, g1] = [gnssMetresAt(gnss, from), gnssMetresAt(gnss, wheel.at)];
  const covered = gnss.recent.length > 1 && (gnss.recent[0] as { at: number }).at <= from && g0 !== null && g1 !== null;
  const metres = covered ? Math.max(0, g1 - g0) : 0;
  if (covered) noteGnss(o);
  else noteLoss(o, wheel.at, Math.abs(rateNow(o.track)) * metresPerPulse * gap);
  const w = covered ? o.w : o.w + (wheel.total - o.wheelKnot.total);
  o.wheelKnot = { at: wheel.at, total: wheel.total };
  return knot(o, wheel.at, w, o.g + metres, metresPerPulse);
}

/** A car that had not moved lost nothing. */
function noteLoss(o: Odometer, at: number, sigma: number): void {
  if (sigma > 0) o.losses.push({ at, sigma });
}
