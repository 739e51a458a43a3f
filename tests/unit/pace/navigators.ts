import { createRandom, type Random } from '#shared/drive/random.ts';
import type { Leads } from '#shared/pace/learn-lead.ts';
import type { Scatter, TapFigures } from '#shared/pace/learn-taps.ts';

/**
 * Navigators with a habit, on a course of places with a tracker of distance and scale: a textbook filter of two states that
 * knows nothing of the engine. 120 km at 50 m/s, seven places, survey 2 m at places and finish, wheel scale unknown by 0.3 %.
 */

export interface Hand {
  /** True lead and true scatter, ms. */
  readonly leadMs: number;
  readonly scatterMs: number;
}

export interface EventFigures {
  readonly taps: readonly TapFigures[];
  readonly ownMs: number;
  readonly officialMs: number;
  /** One sigma of the finish by the tracker: distance, and the survey of the line. */
  readonly sigmaMs: number;
}

const PLACES = [12, 27, 45, 60, 78, 92, 108].map((km) => km * 1000);
const FINISH = 120_000;
const V = 50;
const SURVEY = 2;
const SLIPS = 6e-4;
const WANDER = 1.2e-11;
const SCALE_SIGMA = 0.003;

export function driveEvent(hand: Hand, leads: Leads, scatter: Scatter, seed: number, mistakenAt = -1): EventFigures {
  const random = createRandom(seed, 'event');
  const road = makeRoad(random);
  const tracker = makeTracker();
  const taps: TapFigures[] = [];
  PLACES.forEach((place, i) => {
    road.to(place, tracker.predict);
    const late = hand.leadMs + random.gauss(hand.scatterMs) + (i === mistakenAt ? 3000 : 0);
    // the place as the book prints it, and where the car truly was at the touch less the lead in force
    const book = place + random.gauss(SURVEY);
    const beyond = ((late - leads.glass.leadMs) / 1000) * V;
    const misfitM = book - (tracker.d() + beyond);
    const varianceM2 = tracker.variance();
    const own = ((scatter.scatterMs / 1000) * V) ** 2 + SURVEY ** 2;
    const doubted = misfitM ** 2 > 16 * (varianceM2 + own);
    taps.push({ input: 'glass', verdict: doubted ? 'doubted' : 'used', misfitM, varianceM2, surveySigmaM: SURVEY, speed: V });
    if (!doubted) tracker.tap(misfitM, own);
  });
  road.to(FINISH, tracker.predict);
  // at the true finish line the tracker stands short by so much, so it finishes later
  const ownMs = ((FINISH + random.gauss(SURVEY) - tracker.d()) / V) * 1000;
  return { taps, ownMs, officialMs: 0, sigmaMs: (Math.sqrt(tracker.variance() + SURVEY ** 2) / V) * 1000 };
}

/** True metres to raw metres: a scale of its own that wanders, and slips. */
function makeRoad(random: Random) {
  let [at, scale] = [0, random.gauss(SCALE_SIGMA)];
  return {
    to(place: number, predict: (raw: number) => void): void {
      for (; at < place; at += 1000) {
        predict((1000 + random.gauss(Math.sqrt(SLIPS * 1000))) * Math.exp(-scale));
        scale += random.gauss(Math.sqrt(WANDER * 1000));
      }
    },
  };
}

/** Distance and log scale; common textbook equations. */
function makeTracker() {
  let [d, l] = [0, 0];
  let [dd, dl, ll] = [0.09, 0, SCALE_SIGMA ** 2];
  return {
    d: () => d,
    variance: () => dd,
    predict(raw: number): void {
      const m = raw * Math.exp(l);
      d += m;
      dd += 2 * m * dl + m * m * ll + SLIPS * m + (WANDER * m ** 3) / 3;
      dl += m * ll + (WANDER * m * m) / 2;
      ll += WANDER * m;
    },
    tap(misfit: number, own: number): void {
      const s = dd + own;
      const [kd, kl] = [dd / s, dl / s];
      d += kd * misfit;
      l += kl * misfit;
      ll -= kl * dl;
      dl -= kd * dl;
      dd -= kd * dd;
    },
  };
}
