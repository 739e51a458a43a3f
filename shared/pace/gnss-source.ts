import type { Aids } from '#shared/course/race-class.ts';
import type { FixV1 } from '#shared/journal/observation.ts';
import { type GnssKnot, gnssMetresAt, OUTAGE_US, SURELY_MOVING, takeFix } from '#shared/pace/gnss.ts';
import { rewriteLaunches } from '#shared/pace/launch.ts';
import type { Odometer, OdometerChange } from '#shared/pace/odometer.ts';
import { keepStill, knot, UNREMARKABLE } from '#shared/pace/odometer-knot.ts';
import { projectFix, type Surveyed } from '#shared/pace/projected-fixes.ts';
import { settleSlip } from '#shared/pace/source-comparison.ts';
import { lookAgain, rewriteNodes } from '#shared/pace/source-nodes.ts';
import { bridgeToCounts, lastKnotAt } from '#shared/pace/track.ts';

/** GNSS as the source of distance: where the wheel falls silent, and back. */

/** The wheel is silent for this long while GNSS says the car moves: carry on by GNSS. */
const SILENT_US = 1_000_000;
/** Below this share of the bridged metres the count had stood still, not gone on. */
const COUNT_WENT_ON = 0.8;
/** A ratio known to this tells more: a count that missed some of the way differs by more than the share and metres after it. */
const RATIO_KNOWN = 0.003;
const RATIO_ERR = 0.01;
const RATIO_ERR_M = 5;

export function noteGnss(o: Odometer): void {
  if (o.gnss.by === 'speed') o.usedGnssSpeed = true;
  if (o.gnss.by === 'position') o.usedGnssPosition = true;
}

/** Takes a fix. GNSS carries on from the instant at which the wheel was last heard. `surveyed`: null without surveyed geometry. */
export function takeGnss(
  o: Odometer,
  fix: FixV1,
  aids: Aids,
  now: number,
  metresPerPulse: number,
  surveyed: Surveyed | null = null,
  driven = false,
): OdometerChange {
  if (!takeFix(o.gnss, fix, aids, now)) return UNREMARKABLE;
  if (surveyed !== null && aids.gnssPosition) projectFix(o.secondLook.projected, fix, o.gnss, surveyed);
  const change = carryOn(o, metresPerPulse);
  return lookAgain(o, { metresPerPulse, driven }) ? withNode(change) : change;
}

const withNode = ({ traced, launch, rewritten }: OdometerChange): OdometerChange => ({ traced, launch, rewritten, node: true });

function carryOn(o: Odometer, metresPerPulse: number): OdometerChange {
  const { gnss } = o;
  const { at: arrival } = gnss.last as { at: number };
  const at = Math.max(0, Math.round(arrival - gnss.lag.us));
  if (o.mode === 'none') {
    o.mode = 'gnss';
    o.gnssZero = gnss.metres - o.g;
    return knot(o, at, o.w, o.g, metresPerPulse);
  }
  if (o.mode === 'wheel') {
    if (!wheelFellSilent(o, arrival)) return UNREMARKABLE;
    beginBridge(o, metresPerPulse);
  }
  const lastAt = lastKnotAt(o.track) ?? at;
  const g = gnss.metres - o.gnssZero;
  if (at >= lastAt && g <= o.g) o.stillAt = at;
  if (at < lastAt || g <= o.g) return UNREMARKABLE;
  noteGnss(o);
  noteOutage(o, at, arrival, g - o.g);
  keepStill(o);
  return knot(o, at, o.w, g, metresPerPulse);
}

/** Of a car in traffic: how fast the variance of its speed grows from a known one, m²/s³. Judgement, held against a recorded drive. */
const SPEED_WANDER = 1;
/** What a straight line may leave out of a road, one sigma as a share. Judgement, no source. */
const LINE_SHARE = 0.3;

/** Speeds that wander between two known ones over T seconds leave a variance of qT³/12 in the distance (a Brownian bridge, integrated). */
function noteOutage({ gnss, losses }: Odometer, at: number, arrival: number, metres: number): void {
  const before = gnss.recent[gnss.recent.length - 2];
  const us = before === undefined ? 0 : arrival - before.at;
  if (us <= OUTAGE_US) return;
  losses.push({ at, sigma: gnss.by === 'speed' ? Math.sqrt((SPEED_WANDER * (us / 1e6) ** 3) / 12) : LINE_SHARE * metres });
}

/** Two fixes at least say that the car moves, and have for as long: a car that moves off is ahead of a wheel that is told late. */
function wheelFellSilent(o: Odometer, at: number): boolean {
  if (at - o.wheelKnot.at <= SILENT_US) return false;
  const { recent } = o.gnss;
  let i = recent.length;
  while (i > 0 && (recent[i - 1] as GnssKnot).speed > SURELY_MOVING) i--;
  return recent.length - i >= 2 && at - Math.max(o.wheelKnot.at, (recent[i] as GnssKnot).at) > SILENT_US;
}

function beginBridge(o: Odometer, metresPerPulse: number): void {
  const from = lastKnotAt(o.track) ?? o.wheelKnot.at;
  settleSlip(o, from, metresPerPulse);
  // a wheel silent for longer than GNSS remembers was standing: it moved only as long as GNSS says
  const since = Math.max(from, (o.gnss.recent[0] as { at: number }).at - o.gnss.lag.us);
  o.bridge = { at: from, w: o.w, g: o.g, total: o.wheelKnot.total };
  o.gnssZero = (gnssMetresAt(o.gnss, since) ?? o.gnss.metres) - o.g;
  o.mode = 'gnss';
  o.bridges++;
}

/** The wheel speaks again after GNSS carried on. If its count went on, the count decides; else the bridged metres stand. */
export function handBack(o: Odometer, verdict: 'first' | 'moved' | 'restarted', metresPerPulse: number): OdometerChange {
  const { wheel, gnss, bridge, track } = o;
  const lastAt = lastKnotAt(track) ?? wheel.at;
  const reading = gnssMetresAt(gnss, wheel.at);
  const g = Math.max(o.g, (reading ?? 0) - o.gnssZero);
  const counts = bridge === null || verdict !== 'moved' ? null : wheel.total - bridge.total;
  o.mode = 'wheel';
  o.bridge = null;
  o.wheelKnot = { at: wheel.at, total: wheel.total };
  if (bridge === null || counts === null || !wentOn(o, bridge.at, counts * metresPerPulse, g - bridge.g)) {
    // GNSS knots may already lie a little later than this record
    return knot(o, Math.max(wheel.at, lastAt), o.w, wheel.at >= lastAt ? g : o.g, metresPerPulse);
  }
  const endG = gnssAtRecord(o, wheel.at, g);
  const w = bridge.w + counts;
  bridgeToCounts(track, bridge, wheel.at, w, endG);
  const share = endG > bridge.g ? counts / (endG - bridge.g) : 0;
  o.handedBack = { at: wheel.at, counts, metres: endG - bridge.g };
  rewriteNodes(o.sourceNodes, track, bridge.at, bridge.w, bridge.g, share);
  rewriteLaunches(o.launches, bridge.at, bridge.w, bridge.g, share);
  return knot(o, wheel.at, w, bridge.g, metresPerPulse, { from: bridge.at, w: bridge.w, g: bridge.g, share });
}

/** Did the count go on unheard? By the ratio learnt where there is one, else by most of the way: nominal metres of the count, GNSS's. */
function wentOn({ gnss, comparison }: Odometer, from: number, counted: number, bridged: number): boolean {
  const { filter } = comparison;
  if (filter.p[3] > RATIO_KNOWN * RATIO_KNOWN || gnss.brokenAt > from + gnss.lag.us) return counted >= COUNT_WENT_ON * bridged;
  return Math.abs(counted * filter.ratio - bridged) <= RATIO_ERR * bridged + RATIO_ERR_M;
}

const gnssAtRecord = (o: Odometer, at: number, fallback: number): number => {
  const reading = gnssMetresAt(o.gnss, at);
  return reading === null ? fallback : reading - o.gnssZero;
};
