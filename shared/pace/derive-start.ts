import { firstBelief, firstTyres } from '#shared/pace/belief.ts';
import { instantOfOfficial } from '#shared/pace/clock.ts';
import type { CourseModel } from '#shared/pace/course-model.ts';
import type { Launch } from '#shared/pace/launch.ts';
import { type Anchor, type Derived, nominalMetres, type RunState } from '#shared/pace/run-state.ts';
import { type Counts, tracedAt, withHeat } from '#shared/pace/track.ts';

/** Which launch was the start, when the time started, and the first anchor. */

type StartPart = Pick<Derived, 'releaseAt' | 'startAt' | 'firstMovedAt' | 'start'>;

export interface DerivedStart {
  readonly derived: StartPart;
  readonly anchor: Anchor | null;
}

/** A car that moved off this little before the release jumped the start; earlier movement is shuffling on the grid. */
const JUMPED_US = 3_000_000;
/** One that moved off earlier still, and never stood again, jumped it too; before that it was rolling through. */
const JUMPED_EARLY_US = 10_000_000;
/** A car that was this far from where it stands at the release had been rolling through. */
const ROLLING_M = 30;
const START_VARIANCE = 0.09;
/** Driven wheels spin 5 to 20 m of counts away at the launch, by (8 m)². Common practice, no source. */
const SPIN_VARIANCE = 64;
const ROLLING_VARIANCE = 25;

export function releaseInstant(state: RunState): number | null {
  const { releaseMs } = state.changes;
  const { chosen } = state.clock;
  return releaseMs === null || chosen === null ? null : Math.round(instantOfOfficial(chosen, releaseMs));
}

/** The instant around which the start is looked for: the release, or the crew's own mark of the flag or beam, whichever is first. */
export function startGate(state: RunState, releaseAt: number | null): number | null {
  const mark = state.acts.startMarks[state.acts.startMarks.length - 1];
  if (state.pack.event.rules.timeStart === 'scheduled' || mark === undefined) return releaseAt;
  return releaseAt === null ? mark : Math.min(releaseAt, mark);
}

export function startOf(state: RunState, model: CourseModel): DerivedStart {
  const releaseAt = releaseInstant(state);
  const gate = startGate(state, releaseAt);
  const startAt = startInstant(state, releaseAt);
  const standing: DerivedStart = { derived: { releaseAt, startAt, firstMovedAt: null, start: 'standing' }, anchor: null };
  if (gate === null || state.now < gate - JUMPED_US) return standing;
  const launch = findLaunch(state, gate);
  const d = model.start - Math.max(0, state.changes.stagedBehindM);
  if (launch !== null) return fromRest(state, standing.derived, launch, d);
  if (!rolledThrough(state, gate)) return standing;
  const jumped = state.odometer.launches.done.findLast((l) => l.movedAt < gate);
  if (jumped !== undefined && jumped.movedAt >= gate - JUMPED_EARLY_US) return fromRest(state, standing.derived, jumped, d);
  const raw = tracedAt(state.odometer.track, gate);
  if (raw === null) return standing;
  return {
    derived: { ...standing.derived, start: 'rolling' },
    anchor: firstAnchor(state, Math.round(gate), d, { w: raw.w, g: raw.g }, START_VARIANCE + ROLLING_VARIANCE),
  };
}

/** When the time started by the event's rule; at a beam without a mark the passing of the line decides, later. */
function startInstant(state: RunState, releaseAt: number | null): number | null {
  const mark = state.acts.startMarks[state.acts.startMarks.length - 1];
  switch (state.pack.event.rules.timeStart) {
    case 'scheduled':
      return releaseAt;
    case 'flag':
      return mark ?? releaseAt;
    case 'beam':
      return mark ?? null;
  }
}

/** The first launch after the gate, if it began about where the car stood at the gate; a launch still under way counts. */
function findLaunch(state: RunState, gate: number): Launch | null {
  const { launches, track } = state.odometer;
  const metres = nominalMetres(state);
  const there = tracedAt(track, gate);
  if (there === null) return null;
  const r = there.w * metres + there.g;
  const candidates = launches.current === null ? launches.done : [...launches.done, launches.current];
  const launch = candidates.find((l) => l.movedAt >= gate - JUMPED_US);
  return launch !== undefined && Math.abs(launch.r - r) <= ROLLING_M ? launch : null;
}

function fromRest(state: RunState, standing: StartPart, launch: Launch, d: number): DerivedStart {
  const at = Math.round(launch.first.at);
  return {
    derived: { ...standing, firstMovedAt: at, start: 'from rest' },
    anchor: firstAnchor(state, at, d, { w: launch.w + launch.first.within / nominalMetres(state), g: launch.g }, START_VARIANCE),
  };
}

function firstAnchor(state: RunState, at: number, d: number, counts: Counts, variance: number): Anchor {
  const { pack, odometer } = state;
  const { mmPerPulse, scaleSigma, driven = false } = pack.wheel;
  const spun = variance + (driven ? SPIN_VARIANCE : 0);
  const estimated = pack.settings.scaleRule === 'estimator';
  return {
    at,
    d,
    ...withHeat(odometer.track, at, counts),
    mmPerPulse,
    ...(estimated ? firstTyres(pack) : { cold: 0, speed: 0 }),
    official: 1,
    belief: estimated ? firstBelief(pack, spun) : null,
    scaleVariance: scaleSigma * scaleSigma,
    variance: spun,
    covariance: 0,
    scaleFrom: { at, d, ...counts },
    coldShare: null,
  };
}

/** Has the car moved well away from where it was at the gate? */
export function rolledThrough(state: RunState, gate: number): boolean {
  const { track, w, g } = state.odometer;
  const there = tracedAt(track, gate);
  if (there === null) return false;
  const metres = nominalMetres(state);
  return Math.abs((w - there.w) * metres + (g - there.g)) > ROLLING_M;
}
