import type { Pack } from '#shared/course/pack.ts';
import type { FinishShownV1, RunEndedV1, TapV1 } from '#shared/journal/observation.ts';
import type { Belief } from '#shared/pace/belief.ts';
import { type Clock, makeClock } from '#shared/pace/clock.ts';
import { buildCourseModel, type Changes, type CourseModel, makeChanges } from '#shared/pace/course-model.ts';
import { makeOdometer, type Odometer } from '#shared/pace/odometer.ts';
import { makePlanMemory, type PlanMemory } from '#shared/pace/plan-memory.ts';
import type { Raw } from '#shared/pace/track.ts';

/** Raised whenever the same journal may lead to other figures. */
export const ENGINE_VERSION = '2.0.0';

/**
 * Everything a run knows: plain data (arrays, objects, numbers, text, booleans, null), so that it can be stored as JSON and
 * taken up again. `derived` follows from the rest by one path (`derive`); `shown` is what the displays remember.
 */
export interface RunState {
  readonly engine: string;
  readonly pack: Pack;
  observations: number;
  /** Of the last observation folded: what a snapshot reaches to. */
  lastSeq: number | null;
  /** Latest instant of any observation; the session clock begins at 0. */
  now: number;
  unknownTypes: string[];
  /** Observations of a known type that made no sense. */
  ignored: number;
  changes: Changes;
  clock: Clock;
  odometer: Odometer;
  /** Name of the sensor that the wheel and the wired buttons last came by; null before any was gained. */
  wheelSensor: string | null;
  buttons: Record<string, ButtonMemory>;
  acts: Acts;
  derived: Derived;
  shown: Shown;
}

export interface ButtonMemory {
  presses: number;
  suspect: number | null;
}

/** Every human act, as it was made. Nothing is taken out: a void is an act too. */
export interface Acts {
  taps: TapAct[];
  /** Taps whose raw values may still change. */
  pending: number;
  voided: number[];
  moved: { tap: number; checkpoint: string }[];
  accepted: number[];
  skipped: string[];
  startMarks: number[];
  stops: { from: number; to: number | null }[];
  /** The run was resumed under escort: no advice until it is resumed as racing. */
  escort: boolean;
  ended: { at: number; outcome: RunEndedV1['outcome'] } | null;
  finishShown: { engine: FinishShownV1['engine']; elapsedMs: number; timeErrorMs: number } | null;
  /** The port that carries the wheel was lost then. */
  sensorLostAt: number | null;
}

export interface TapAct {
  readonly seq: number;
  /** The touch. */
  readonly at: number;
  readonly input: TapV1['input'];
  readonly checkpoint: string | null;
  /** The instant that counts: the touch less the navigator's lead. */
  readonly t: number;
  /** Raw values then, and speed in m/s by the nominal scale. Null while no sample at or after it has come. */
  raw: TapRaw | null;
  /** False while `raw` was carried forward rather than interpolated: a late sample still replaces it. */
  firm: boolean;
}

export interface TapRaw extends Raw {
  readonly v: number;
}

/** Distance from here on: official d at these raw values, with this scale, until the next anchor. */
export interface Anchor extends Raw {
  readonly at: number;
  readonly d: number;
  readonly mmPerPulse: number;
  /** What the tyres do to the scale: −`cold` × coldness, +`speed` × (v/50)². 0 under the simple rules. */
  readonly cold: number;
  readonly speed: number;
  /** Official metres per metre driven (by GNSS); 1 under the simple rules. */
  readonly official: number;
  /** The estimator's covariance here; null under the simple rules, whose own figures follow. */
  readonly belief: Belief | null;
  /** Relative variance of the scale, variance of d in m², and their covariance in m: the touch that set both errs in both. */
  readonly scaleVariance: number;
  readonly variance: number;
  readonly covariance: number;
  /** Where the leg that may correct the scale next begins. */
  readonly scaleFrom: ScaleMark;
  /** Share of the cold tyres' deficit that the scale in force was measured with; null while it is the pack's own. */
  readonly coldShare: number | null;
}

export interface ScaleMark {
  readonly at: number;
  readonly d: number;
  readonly w: number;
  readonly g: number;
}

export interface PlacePassing {
  by: 'tap' | 'distance' | null;
  /** Session-clock instant, whole microseconds. */
  at: number | null;
  tap: number | null;
  /** Distance shown at the touch, before it moved, and official less measured; metres. */
  measured: number | null;
  moved: number | null;
  scaleBefore: number;
  scaleAfter: number;
  scaleKept: 'settle' | 'place' | 'leg too short' | 'rule' | null;
}

export interface DerivedTap {
  readonly seq: number;
  readonly checkpoint: string | null;
  readonly verdict: 'provisional' | 'used' | 'doubted' | 'no place near' | 'repeated' | 'voided';
  readonly input: TapV1['input'];
  /** Official less believed, m; variance of the believed distance, the lead's part included, m²; the survey's sigma, m; speed at the touch, m/s. 0 where nothing was compared. */
  readonly misfit: number;
  readonly variance: number;
  readonly surveySigma: number;
  readonly speed: number;
  /** How far the distance moved, or for a tap not used would have, m. */
  readonly moved: number;
  readonly scaleBefore: number;
  readonly scaleAfter: number;
  readonly scaleKept: PlacePassing['scaleKept'];
}

export interface Derived {
  /** Session-clock instants, whole microseconds. */
  releaseAt: number | null;
  startAt: number | null;
  firstMovedAt: number | null;
  /** How the start is known: still standing, from rest, or rolling through. */
  start: 'standing' | 'from rest' | 'rolling';
  anchors: Anchor[];
  /** Instant of the last tap taken in, or of the start. */
  placedAt: number;
  passings: PlacePassing[];
  taps: DerivedTap[];
  /** Least official distance whose passing would change anything; null when none is left. */
  nextD: number | null;
}

/** What the displays remember: not part of what happened. */
export interface Shown {
  /** Instant of the last advice. */
  advisedAt: number | null;
  hold: HoldMemory | null;
  bandLevel: boolean;
  plan: PlanMemory;
}

export interface HoldMemory {
  kind: 'hold' | 'cannot be made up' | 'cannot be given back';
  /** m/s as shown, already in the crew's steps. */
  speed: number;
  by: number;
  changedAt: number;
  /** The stretch under one limit that the speed belongs to, by its end in metres. */
  stretch: number;
  frozen: boolean;
}

export function makeRunState(pack: Pack): RunState {
  const changes = makeChanges(pack);
  const odometer = makeOdometer();
  odometer.track.perCount = pack.wheel.mmPerPulse / 1000;
  return {
    engine: ENGINE_VERSION,
    pack,
    observations: 0,
    lastSeq: null,
    now: 0,
    unknownTypes: [],
    ignored: 0,
    changes,
    clock: makeClock(),
    odometer,
    wheelSensor: null,
    buttons: {},
    acts: {
      taps: [],
      pending: 0,
      voided: [],
      moved: [],
      accepted: [],
      skipped: [],
      startMarks: [],
      stops: [],
      escort: false,
      ended: null,
      finishShown: null,
      sensorLostAt: null,
    },
    derived: {
      releaseAt: null,
      startAt: null,
      firstMovedAt: null,
      start: 'standing',
      anchors: [],
      placedAt: 0,
      passings: [],
      taps: [],
      nextD: null,
    },
    shown: { advisedAt: null, hold: null, bandLevel: true, plan: makePlanMemory() },
  };
}

/** Built from pack and changes, and never stored: a restored state builds it again. */
const models = new WeakMap<RunState, CourseModel>();

export function modelOf(state: RunState): CourseModel {
  const built = models.get(state);
  if (built !== undefined && built.version === state.changes.version) return built;
  const model = buildCourseModel(state.pack, state.changes);
  models.set(state, model);
  return model;
}

/** A deep copy of plain data; the pack, which never changes, is shared. */
export function copyState(state: RunState): RunState {
  const { pack, ...rest } = state;
  return { ...(copyPlain(rest) as Omit<RunState, 'pack'>), pack };
}

function copyPlain(value: unknown): unknown {
  if (Array.isArray(value)) return typeof value[0] === 'object' ? value.map(copyPlain) : value.slice();
  if (typeof value !== 'object' || value === null) return value;
  const copy: Record<string, unknown> = {};
  for (const [key, inner] of Object.entries(value)) copy[key] = copyPlain(inner);
  return copy;
}

/** Nominal metres per pulse: judges plausibility, launches and raw speed; never distance. */
export const nominalMetres = (state: RunState): number => state.pack.wheel.mmPerPulse / 1000;
