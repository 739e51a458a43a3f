import type { FixV1 } from '#shared/journal/observation.ts';
import { type GnssKnot, gnssMetresAt, LAG_BEFORE } from '#shared/pace/gnss.ts';
import { doubtLag, gripNoise, type Latency, lagSigma, learn, makeLatency, predict, readingNoise } from '#shared/pace/gnss-latency.ts';
import type { Odometer } from '#shared/pace/odometer.ts';
import { agreeFrom, carryMarks, finish, judge, makeSlipWatch, type SlipWatch } from '#shared/pace/slip-watch.ts';
import { addKnot, type Knots, lastKnotAt, rawAt } from '#shared/pace/track.ts';

/** GNSS held against the wheel, about twice a second: lateness and ratio are learnt from it, slips are caught by it. */
export interface SourceComparison {
  filter: Latency;
  readonly slip: SlipWatch;
  via: FixV1['via'];
  /** The sample before: instant of arrival, counts and other metres as of the lateness then held, speed. Null: begin anew. */
  last: { at: number; w: number; g: number; v: number } | null;
  /** How often either source had failed by then. */
  failures: number;
  /** Readings in a row that taught nothing. */
  refused: number;
  /** Σ of squared fix intervals since then, s². */
  spread: number;
}

export const makeSourceComparison = (): SourceComparison => ({
  filter: makeLatency(LAG_BEFORE.nmea.us / 1e6, LAG_BEFORE.nmea.sigmaUs / 1e6),
  slip: makeSlipWatch(),
  via: 'nmea',
  last: null,
  failures: 0,
  refused: 0,
  spread: 0,
});

/** What the comparing needs to know of the wheel: nominal metres per pulse; whether the engine drives it. */
export interface WheelKind {
  readonly metresPerPulse: number;
  readonly driven: boolean;
}

/** One sample in each such stretch of session time, so that it does not matter where the comparing began. */
const EVERY_US = 400_000;
/** See `Reading.late`. A tablet's own location is smoothed, and by how much is anyone's guess. */
const LATE = { nmea: 0.03, geolocation: 1 } as const;
const DOUBT_S = 0.2;
const REFUSED = 6;
/** A pause longer than this in the comparing begins anew. */
const PAUSE_US = 3_000_000;

export const failuresOf = (o: Odometer): number => o.bridges + o.wheel.restarts;

/** Compares at a fix that both sources reach. */
export function compareSources(o: Odometer, fix: GnssKnot, before: GnssKnot | undefined, wheel: WheelKind): void {
  const c = o.comparison;
  const via = o.gnss.last?.via ?? 'nmea';
  c.spread += before === undefined ? 0 : ((fix.at - before.at) / 1e6) ** 2;
  if (c.last !== null && Math.floor(fix.at / EVERY_US) === Math.floor(c.last.at / EVERY_US)) return;
  if (via !== c.via) {
    c.filter = makeLatency(LAG_BEFORE[via].us / 1e6, LAG_BEFORE[via].sigmaUs / 1e6);
    c.via = via;
    c.last = null;
  }
  const raw = o.mode === 'wheel' && o.gnss.by !== 'position' ? rawAt(o.track, fix.at - o.gnss.lag.us) : null;
  if (raw === null) {
    c.last = null;
    finish(c.slip, fix.at);
    return;
  }
  const noise = readingNoise(wheel.metresPerPulse, fix.speed);
  const { last } = c;
  const here = { at: fix.at, w: raw.w, g: raw.g, v: fix.speed };
  if (last === null || fix.at - last.at > PAUSE_US || o.gnss.brokenAt > last.at || c.failures !== failuresOf(o)) {
    finish(c.slip, fix.at);
    agreeFrom(c.slip, c.filter, { at: fix.at, reading: fix.metres, v: fix.speed, noise, late: 0 });
  } else take(o, last, here, fix, noise, wheel);
  c.failures = failuresOf(o);
  c.spread = 0;
  c.last = here;
}

type Sample = NonNullable<SourceComparison['last']>;

function take(o: Odometer, last: Sample, here: Sample, fix: GnssKnot, noise: number, wheel: WheelKind): void {
  const { filter, slip, spread } = o.comparison;
  const [dt, metres, other] = [(here.at - last.at) / 1e6, (here.w - last.w) * wheel.metresPerPulse, here.g - last.g];
  const grip = gripNoise(wheel.driven, Math.min(here.v, last.v));
  predict(filter, { wheel: metres, other, dv: here.v - last.v, dt, spread, grip });
  carryMarks(slip, metres, other, 0.0064 * spread + 0.002 * dt);
  const { via } = o.comparison;
  const reading = { at: here.at, reading: fix.metres, v: here.v, noise, late: LATE[via] };
  const verdict = judge(slip, filter, reading);
  if (verdict !== null) {
    follow(o, here, verdict.metres, verdict.sigma);
    return;
  }
  if (here.v < 0.5 && last.v < 0.5) return;
  const lag = filter.lag;
  const c = o.comparison;
  c.refused = learn(filter, fix.metres, noise) ? 0 : c.refused + 1;
  if (via === 'geolocation' && c.refused >= REFUSED) {
    // neither a slip nor what was expected, again and again: lateness was held to be better known than it is
    doubtLag(filter, DOUBT_S);
    agreeFrom(slip, filter, reading);
  }
  // the next sample looks the wheel up by the new lateness: so must this one have
  here.w -= ((filter.lag - lag) * here.v) / (filter.ratio * wheel.metresPerPulse);
  o.gnss.lag.us = Math.round(filter.lag * 1e6);
  o.gnss.lag.sigmaUs = Math.round(lagSigma(filter) * 1e6);
}

/** A wheel that slipped falls silent: what it counted too many or too few since the last look is put right before it is left. */
export function settleSlip(o: Odometer, at: number, metresPerPulse: number): void {
  const { last, slip, filter } = o.comparison;
  const reading = gnssMetresAt(o.gnss, at);
  if (slip.active === null || last === null || reading === null) return;
  const counted = filter.ratio * (o.w - last.w) * metresPerPulse + o.g - last.g;
  const metres = reading - filter.reading - counted;
  slip.active.metres += metres;
  o.g += metres;
  addKnot(o.track, at, o.w, o.g, false);
}

/** The distance follows GNSS from the instant of the fix on. */
function follow(o: Odometer, here: Sample, metres: number, sigma: number): void {
  const from = here.at - o.gnss.lag.us;
  o.g += metres;
  here.g += metres;
  for (const knots of [o.track.recent, o.track.trace]) addFrom(knots, from, metres);
  if ((lastKnotAt(o.track) ?? 0) < from) addKnot(o.track, from, o.w, o.g, false);
  const loss = o.losses[o.losses.length - 1];
  if (loss !== undefined && loss.by === 'slip' && here.at - loss.at < PAUSE_US) loss.at = from;
  else o.losses.push({ at: from, sigma, by: 'slip' });
}

function addFrom(knots: Knots, from: number, metres: number): void {
  for (let i = knots.at.length - 1; i >= knots.head && (knots.at[i] as number) >= from; i--) {
    knots.g[i] = (knots.g[i] as number) + metres;
  }
}
