import type { CourseModel } from '#shared/pace/course-model.ts';
import { startOf } from '#shared/pace/derive-start.ts';
import type { JudgedTap } from '#shared/pace/derive-tap.ts';
import { distanceOf } from '#shared/pace/distance.ts';
import { type Anchor, type Derived, modelOf, type PlacePassing, type RunState, type TapAct } from '#shared/pace/run-state.ts';
import { likeliestChain } from '#shared/pace/tap-chain.ts';
import type { Trace } from '#shared/pace/track.ts';

/**
 * The one path from what was recorded to what it means: start, anchors, passings, verdicts. Run anew, from the start of the run,
 * whenever an act, a passing or the clock changes anything; costs one look at the sparse trace. A voided tap is simply not
 * looked at, so it leaves everything as if it had never been made.
 */
export function derive(state: RunState): void {
  const model = modelOf(state);
  const start = startOf(state, model);
  const passings = model.places.map((): PlacePassing => unpassed(state.pack.wheel.mmPerPulse));
  const derived: Derived = {
    releaseAt: start.derived.releaseAt,
    startAt: start.derived.startAt,
    firstMovedAt: start.derived.firstMovedAt,
    start: start.derived.start,
    anchors: start.anchor === null ? [] : [start.anchor],
    placedAt: start.anchor?.at ?? 0,
    passings,
    taps: [],
    nextD: null,
  };
  const walk = new Walk(state, model, derived);
  for (const step of likeliestChain(state, model, start.anchor).steps) {
    if (step.kind === 'tap') walk.take(step.judged);
    else walk.compare(step.anchor);
  }
  if (start.anchor !== null) {
    walk.passUntil(Number.POSITIVE_INFINITY, null);
    derived.nextD = walk.nextD();
  }
  derived.taps.sort((a, b) => a.seq - b.seq);
  state.derived = derived;
}

const unpassed = (mm: number): PlacePassing => ({
  by: null,
  at: null,
  tap: null,
  measured: null,
  moved: null,
  scaleBefore: mm,
  scaleAfter: mm,
  scaleKept: null,
});

/** Walks along the trace, from touch to touch, passing places by distance on the way. */
class Walk {
  /** Index into the trace of the knot last looked at. */
  private knot = -1;
  /** Instant and distance walked to. */
  private at: number;
  private d: number;
  /** Nothing is crossed before this distance: most knots are far from every place. */
  private ahead = Number.NEGATIVE_INFINITY;

  constructor(
    private readonly state: RunState,
    private readonly model: CourseModel,
    private readonly derived: Derived,
  ) {
    const anchor = this.anchor();
    this.at = anchor?.at ?? 0;
    this.d = anchor?.d ?? 0;
  }

  private anchor(): Anchor | undefined {
    return this.derived.anchors[this.derived.anchors.length - 1];
  }

  take({ tap, verdict, use }: JudgedTap): void {
    const anchor = this.anchor();
    const { derived } = this;
    derived.taps.push(verdict);
    // a tap that is not used is no knot of the walk either: places are passed at the instants they would be without it
    if (use === null) return;
    if (anchor !== undefined && tap.raw !== null && tap.t >= this.at) this.passUntil(tap.t, distanceOf(anchor, tap.raw));
    derived.passings[use.place] = use.passing;
    derived.anchors.push(use.anchor);
    derived.placedAt = use.anchor.at;
    this.snap(use.anchor, use.place, tap);
  }

  /** A comparison with GNSS moves the distance a little: places jumped over are passed now, none is given back. */
  compare(anchor: Anchor): void {
    const before = this.anchor();
    if (before !== undefined && anchor.at >= this.at) this.passUntil(anchor.at, distanceOf(before, anchor));
    this.derived.anchors.push(anchor);
    this.model.places.forEach((place, i) => {
      const passing = this.derived.passings[i] as PlacePassing;
      if (passing.by === null && place.d <= anchor.d) this.passByDistance(passing, anchor.at);
    });
    this.at = anchor.at;
    this.d = anchor.d;
    this.ahead = Number.NEGATIVE_INFINITY;
  }

  /** After a snap: places jumped over are passed now; places the car is again before are not passed yet. */
  private snap(anchor: Anchor, placeIndex: number, tap: TapAct): void {
    this.model.places.forEach((place, i) => {
      const passing = this.derived.passings[i] as PlacePassing;
      if (i === placeIndex || passing.by === 'tap') return;
      if (place.d > anchor.d) {
        passing.by = null;
        passing.at = null;
      } else if (passing.by === null) {
        this.passByDistance(passing, Math.round(tap.t));
      }
    });
    this.at = anchor.at;
    this.d = anchor.d;
    this.ahead = Number.NEGATIVE_INFINITY;
  }

  /** Passes places by distance up to an instant, whose own distance is given where it is no knot of the trace. */
  passUntil(until: number, dUntil: number | null): void {
    const anchor = this.anchor() as Anchor;
    const { trace } = this.state.odometer.track;
    const { at } = trace;
    let i = this.knot < 0 ? firstAfter(at, this.at) : this.knot;
    while (i < at.length && (at[i] as number) <= this.at) i++;
    for (; i < at.length && (at[i] as number) < until; i++) {
      const d = alongTrace(anchor, trace, i);
      // most knots are far from every place
      if (d >= this.d && d < this.ahead) {
        this.d = d;
        this.at = at[i] as number;
      } else this.advance(at[i] as number, d);
    }
    this.knot = i;
    if (dUntil !== null) this.advance(until, dUntil);
  }

  private advance(at: number, d: number): void {
    const back = d < this.d;
    const crosses = !back && d >= this.ahead;
    if (crosses) this.cross(at, d);
    this.at = at;
    this.d = d;
    if (back) this.ahead = Number.NEGATIVE_INFINITY;
    else if (crosses) this.ahead = this.nextD() ?? Number.POSITIVE_INFINITY;
  }

  private cross(at: number, d: number): void {
    if (d <= this.d) return;
    const instantOf = (x: number): number => Math.round(this.at + ((x - this.d) / (d - this.d)) * (at - this.at));
    const { derived, model } = this;
    if (derived.startAt === null && derived.start !== 'standing' && model.start >= this.d && model.start <= d) {
      // the beam at the line; the car may be rolling back and forth before it
      if (this.state.pack.event.rules.timeStart === 'beam') derived.startAt = instantOf(model.start);
    }
    model.places.forEach((place, i) => {
      const passing = derived.passings[i] as PlacePassing;
      if (passing.by !== null || place.d <= this.d || place.d > d) return;
      this.passByDistance(passing, instantOf(place.d));
    });
  }

  private passByDistance(passing: PlacePassing, at: number): void {
    const scale = (this.anchor() as Anchor).mmPerPulse;
    passing.by = 'distance';
    passing.at = at;
    passing.scaleBefore = scale;
    passing.scaleAfter = scale;
  }

  /** The next place, or the line, still to be passed by distance. */
  nextD(): number | null {
    const { derived, model } = this;
    if (derived.startAt === null && this.state.pack.event.rules.timeStart === 'beam' && derived.start !== 'standing') return model.start;
    const next = model.places.find((place, i) => place.d > this.d && (derived.passings[i] as PlacePassing).by === null);
    return next?.d ?? null;
  }
}

/** `distanceOf` of a knot of the trace, to the last bit. */
function alongTrace(a: Anchor, { w, g, h, u }: Trace, i: number): number {
  const counts = (w[i] as number) - a.w - a.cold * ((h[i] as number) - a.h) + a.speed * ((u[i] as number) - a.u);
  return a.d + a.official * ((counts * a.mmPerPulse) / 1000 + ((g[i] as number) - a.g));
}

function firstAfter(at: readonly number[], instant: number): number {
  let [low, high] = [0, at.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    if ((at[middle] as number) <= instant) low = middle + 1;
    else high = middle;
  }
  return low;
}
