import { type GnssKnot, metresAtArrival, OUTAGE_US, SURELY_MOVING } from '#shared/pace/gnss.ts';
import type { Odometer } from '#shared/pace/odometer.ts';
import { makeProjectedFixes, type ProjectedFixes, positionAt } from '#shared/pace/projected-fixes.ts';
import { compareSources, type WheelKind } from '#shared/pace/source-comparison.ts';
import { NODE_US, type SourceNode } from '#shared/pace/source-node.ts';
import { rawAt, type Track, withHeat } from '#shared/pace/track.ts';

/**
 * Fixes are looked at a second time once the wheel has been heard up to their instant: only then do both sources tell of it,
 * whatever the order in which they came. Nodes are made in this second look.
 */
export interface SecondLook {
  /** The last fix looked at, by the instant it came. */
  seenAt: number;
  /** Instant of the next node; null before the first fix. */
  dueAt: number | null;
  /** The node before: GNSS's reading by arrival, its lateness and speed then, and how often either source had failed. */
  last: { reading: number; lagUs: number; speed: number; at: number; failures: number; byGnss: boolean } | null;
  /** Σ of squared fix intervals since that node, s². */
  spread: number;
  readonly projected: ProjectedFixes;
}

export const makeSecondLook = (): SecondLook => ({ seenAt: 0, dueAt: null, last: null, spread: 0, projected: makeProjectedFixes() });

/** A car slower than this may as well stand, m/s. */
const MOVES = 1;
/** A wheel that does not turn is waited for no longer. */
const WAIT_US = 2_000_000;

/** Looks at the fixes that both sources now reach; true when a node was made. */
export function lookAgain(o: Odometer, wheel: WheelKind): boolean {
  const { recent } = o.gnss;
  const look = o.secondLook;
  let i = recent.length;
  while (i > 0 && (recent[i - 1] as GnssKnot).at > look.seenAt) i--;
  let made = false;
  for (; i < recent.length && isReached(o, recent[i] as GnssKnot); i++) {
    const fix = recent[i] as GnssKnot;
    compareSources(o, fix, recent[i - 1], wheel);
    if (takeNode(o, fix, recent[i - 1])) made = true;
    look.seenAt = fix.at;
  }
  return made;
}

/** Has the wheel turned at or after the fix came, or long not turned while GNSS hardly moved? Whatever comes later changes nothing. */
function isReached(o: Odometer, fix: GnssKnot): boolean {
  if (o.mode !== 'wheel' || o.wheelKnot.at >= fix.at) return true;
  return fix.speed < SURELY_MOVING && (o.gnss.last as { at: number }).at - fix.at > WAIT_US;
}

const failuresOf = (o: Odometer): number => o.bridges + o.wheel.restarts + o.losses.length + o.fills.count + o.second.standIns;

function takeNode(o: Odometer, fix: GnssKnot, before: GnssKnot | undefined): boolean {
  const look = o.secondLook;
  const here = fix.at - o.gnss.lag.us;
  const gap = before === undefined ? 0 : fix.at - before.at;
  look.spread += (gap / 1e6) ** 2;
  // never inside an outage, and the first of a movement where it begins
  if (look.dueAt === null || gap > OUTAGE_US || (fix.speed < MOVES && look.dueAt < here)) look.dueAt = here;
  if (fix.speed < MOVES || here < look.dueAt) return false;
  const at = Math.round(look.dueAt);
  look.dueAt = at + NODE_US;
  const raw = rawAt(o.track, at);
  const reading = metresAtArrival(o.gnss, at + o.gnss.lag.us);
  if (raw === null || reading === null) return false;
  const { last } = look;
  const { us: lagUs, sigmaUs } = o.gnss.lag;
  // both ends of the stretch by one lateness, whatever it was held to be at the node before
  const step = last === null ? reading : reading - last.reading - ((lagUs - last.lagUs) / 1e6) * last.speed;
  const previous = o.sourceNodes[o.sourceNodes.length - 1];
  const node: SourceNode = {
    at,
    w: raw.w,
    g: raw.g,
    h: raw.h,
    u: raw.u,
    gnssMetres: (previous?.gnssMetres ?? 0) + step,
    compared: comparedVariance(o, at, fix.speed),
    position: positionAt(look.projected, o.gnss, at + lagUs, (sigmaUs / 1e6) * fix.speed),
  };
  o.sourceNodes.push(node);
  look.last = { reading, lagUs, speed: fix.speed, at, failures: failuresOf(o), byGnss: o.mode === 'gnss' };
  look.spread = 0;
  return true;
}

/** Receiver noise: independent from fix to fix, and slowly wandering, m/s. Judgement for a car's receiver, no source. */
const WHITE = 0.08;
const SLOW = 0.01;
/** What is left of the jitter of a fix's instant, s. */
const JITTER_S = 0.003;
/** Lateness that moved by more than this between two nodes was not known at the first. */
const SETTLED_US = 100_000;

function comparedVariance(o: Odometer, at: number, speed: number): number | null {
  const { last, spread } = o.secondLook;
  const { lag, brokenAt, by } = o.gnss;
  if (last === null || last.byGnss || o.mode !== 'wheel' || by !== 'speed' || failuresOf(o) !== last.failures) return null;
  if (brokenAt > last.at + last.lagUs || Math.abs(lag.us - last.lagUs) > SETTLED_US) return null;
  const seconds = (at - last.at) / 1e6;
  const late = (lag.sigmaUs / 1e6) * (speed - last.speed);
  const jitter = JITTER_S * JITTER_S * (speed * speed + last.speed * last.speed);
  return WHITE * WHITE * spread + (SLOW * seconds) ** 2 + late * late + jitter;
}

/** Part of the past is told anew: GNSS metres beyond `g` since `from` became `share` counts each. */
export function rewriteNodes(nodes: SourceNode[], track: Track, from: number, w: number, g: number, share: number): void {
  for (let i = nodes.length - 1; i >= 0; i--) {
    const node = nodes[i] as SourceNode;
    if (node.at <= from) return;
    nodes[i] = { ...node, ...withHeat(track, node.at, { w: w + (node.g - g) * share, g }) };
  }
}
