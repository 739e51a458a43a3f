import type { Aids } from '#shared/course/race-class.ts';
import type { FixV1, PulseV1 } from '#shared/journal/observation.ts';
import { type Gnss, gnssMetresAt, makeGnss, takeFix } from '#shared/pace/gnss.ts';
import { isLaunching, type LaunchEvent, type LaunchWatch, makeLaunchWatch, rewriteLaunches, watchLaunch } from '#shared/pace/launch.ts';
import { addKnot, bridgeToCounts, makeTrack, rateNow, type Track } from '#shared/pace/track.ts';
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
  /** Distance that nothing measured: instants and one sigma in metres. */
  losses: { at: number; sigma: number }[];
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
  usedWheel: false,
  usedGnssSpeed: false,
  usedGnssPosition: false,
  bridges: 0,
  otherRecords: 0,
});

/** The wheel is silent for this long while GNSS says the car moves faster than this: carry on by GNSS. */
const SILENT_US = 1_000_000;
export const SURELY_MOVING = 3;
/** Below this share of the bridged metres the count had stood still, not gone on. */
const COUNT_WENT_ON = 0.8;
/** Unchanged for longer than this is a rest. */
const RESTED_US = 700_000;

/** Nothing moved, or moved as it does a hundred times a second: one value for all, never written to. */
const UNREMARKABLE: OdometerChange = { traced: false, launch: 'none', rewritten: null };

function knot(
  o: Odometer,
  at: number,
  w: number,
  g: number,
  metresPerPulse: number,
  rewritten: OdometerChange['rewritten'] = null,
): OdometerChange {
  o.w = w;
  o.g = g;
  const launch = watchLaunch(o.launches, {
    at,
    r: w * metresPerPulse + g,
    w,
    g,
    stillAt: o.stillAt,
    pulseMetres: o.mode === 'wheel' ? metresPerPulse : 0,
  });
  const traced = addKnot(o.track, at, w, g, isLaunching(o.launches) || launch !== 'none');
  return traced || launch !== 'none' || rewritten !== null ? { traced, launch, rewritten } : UNREMARKABLE;
}

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

/** The end of a standstill becomes a knot, or a straight line would have the car creep all the while. */
function keepStill(o: Odometer): void {
  const last = o.track.recent.at[o.track.recent.at.length - 1];
  if (last !== undefined && o.stillAt > last) addKnot(o.track, o.stillAt, o.w, o.g, false);
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

/** The wheel speaks again after GNSS carried on. If its count went on, the count decides; else the bridged metres stand. */
function handBack(o: Odometer, verdict: 'first' | 'moved' | 'restarted', metresPerPulse: number): OdometerChange {
  const { wheel, gnss, bridge, track } = o;
  const lastAt = track.recent.at[track.recent.at.length - 1] ?? wheel.at;
  const reading = gnssMetresAt(gnss, wheel.at);
  const g = Math.max(o.g, (reading ?? 0) - o.gnssZero);
  const counts = bridge === null || verdict !== 'moved' ? null : wheel.total - bridge.total;
  o.mode = 'wheel';
  o.bridge = null;
  o.wheelKnot = { at: wheel.at, total: wheel.total };
  if (bridge === null || counts === null || counts * metresPerPulse < COUNT_WENT_ON * (g - bridge.g)) {
    // GNSS knots may already lie a little later than this record
    return knot(o, Math.max(wheel.at, lastAt), o.w, wheel.at >= lastAt ? g : o.g, metresPerPulse);
  }
  const endG = gnssAtRecord(o, wheel.at, g);
  const w = bridge.w + counts;
  bridgeToCounts(track, bridge, wheel.at, w, endG);
  const share = endG > bridge.g ? counts / (endG - bridge.g) : 0;
  rewriteLaunches(o.launches, bridge.at, bridge.w, bridge.g, share);
  return knot(o, wheel.at, w, bridge.g, metresPerPulse, { from: bridge.at, w: bridge.w, g: bridge.g, share });
}

const gnssAtRecord = (o: Odometer, at: number, fallback: number): number => {
  const reading = gnssMetresAt(o.gnss, at);
  return reading === null ? fallback : reading - o.gnssZero;
};

function noteGnss(o: Odometer): void {
  if (o.gnss.by === 'speed') o.usedGnssSpeed = true;
  if (o.gnss.by === 'position') o.usedGnssPosition = true;
}

/** Takes a fix. GNSS carries on from the instant at which the wheel was last heard. */
export function takeGnss(o: Odometer, fix: FixV1, aids: Aids, now: number, metresPerPulse: number): OdometerChange {
  const { gnss } = o;
  if (!takeFix(gnss, fix, aids, now)) return UNREMARKABLE;
  if (o.mode === 'none') {
    o.mode = 'gnss';
    o.gnssZero = gnss.metres - o.g;
    return knot(o, fix.at, o.w, o.g, metresPerPulse);
  }
  if (o.mode === 'wheel') {
    if (!wheelFellSilent(o, fix.at)) return UNREMARKABLE;
    beginBridge(o);
  }
  const lastAt = o.track.recent.at[o.track.recent.at.length - 1] ?? fix.at;
  const g = gnss.metres - o.gnssZero;
  if (fix.at >= lastAt && g <= o.g) o.stillAt = fix.at;
  if (fix.at < lastAt || g <= o.g) return UNREMARKABLE;
  noteGnss(o);
  keepStill(o);
  return knot(o, fix.at, o.w, g, metresPerPulse);
}

function wheelFellSilent(o: Odometer, at: number): boolean {
  const { recent } = o.gnss;
  const [a, b] = [recent[recent.length - 2], recent[recent.length - 1]];
  if (a === undefined || b === undefined || at - o.wheelKnot.at <= SILENT_US) return false;
  return a.speed > SURELY_MOVING && b.speed > SURELY_MOVING;
}

function beginBridge(o: Odometer): void {
  const from = o.track.recent.at[o.track.recent.at.length - 1] ?? o.wheelKnot.at;
  // a wheel silent for longer than GNSS remembers was standing: it moved only as long as GNSS says
  const since = Math.max(from, (o.gnss.recent[0] as { at: number }).at);
  o.bridge = { at: from, w: o.w, g: o.g, total: o.wheelKnot.total };
  o.gnssZero = (gnssMetresAt(o.gnss, since) ?? o.gnss.metres) - o.g;
  o.mode = 'gnss';
  o.bridges++;
}
