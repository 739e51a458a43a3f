import type { Checkpoint, CourseBook, Zone } from '#shared/course/course-book.ts';
import type { EventRules, RaceClass } from '#shared/course/race-class.ts';
import type { SpeedUnit } from '#shared/units.ts';

/**
 * Everything the cockpit needs for one attempt, as canonical JSON named by its SHA-256.
 * Validated (zod) when fetched, trusted by digest from then on.
 */
export interface Pack {
  readonly format: 1;
  readonly event: {
    readonly id: string;
    readonly name: string;
    readonly place: string;
    readonly timeZone: string;
    readonly rules: EventRules;
  };
  readonly team: { readonly id: string; readonly name: string };
  readonly entry: {
    readonly id: string;
    readonly number: string;
    readonly crew: readonly { readonly name: string; readonly role: string }[];
  };
  readonly attempt: {
    readonly id: string;
    readonly number: number;
    /** Official clock time of the release, unix ms; null until it is known. */
    readonly releaseMs: number | null;
    /** Metres the car's nose stands behind the start line. */
    readonly stagedBehindM: number;
  };
  readonly courseBook: CourseBook;
  readonly raceClass: RaceClass;
  /** The crew's own checkpoints over the book, in order of distance. Same shape, source 'own'. */
  readonly ownCheckpoints: readonly Checkpoint[];
  readonly crewZones: readonly Zone[];
  readonly car: CarInPack;
  readonly wheel: WheelInPack;
  readonly plan: PlanSettings;
  readonly settings: CockpitSettings;
}

export interface CarInPack {
  readonly id: string;
  readonly name: string;
  readonly dialReadsHighPercent: number;
  /** The timed point is the nose. How far behind it the navigator's sight line and the GNSS aerial are, metres; 0 where left out. */
  readonly behindNose?: { readonly seatM: number; readonly aerialM: number };
}

export interface WheelInPack {
  readonly setupId: string;
  readonly setupName: string;
  /** The wheel channel that measures distance. */
  readonly channel: number;
  readonly pulsesPerTurn: number;
  /** Wheel scale to begin with. */
  readonly mmPerPulse: number;
  /** One standard deviation of that scale, as a fraction (0.003 = 0.3 %). */
  readonly scaleSigma: number;
  readonly scaleSource: 'nominal' | 'measured distance' | 'run';
  /** The engine drives this wheel: it spins at the start and slips with speed. False where left out. */
  readonly driven?: boolean;
  /** Another wheel's channel to compare with; its scale is learnt on the way. */
  readonly secondChannel?: number;
}

export interface PlanSettings {
  /** m/s², both positive. */
  readonly acceleration: number;
  readonly deceleration: number;
  /** Share of the cap kept free (0.02 = plan to cap less 2 %). */
  readonly capMargin: number;
  /** Seconds in hand kept until the last tenth of the course; 0 where left out. */
  readonly reserveS?: number;
}

export interface CockpitSettings {
  readonly speedUnit: SpeedUnit;
  /** estimator: distance, scale, tyres and lead judged together, with GNSS where the class permits it. The others are simple rules. */
  readonly scaleRule: 'estimator' | 'gain' | 'ratio' | 'place only';
  /** Navigator's tap lead by input, ms: the instant that counts is the touch less this. May be negative. */
  readonly tapLeadMs: { readonly glass: number; readonly wired: number };
  /** How well that lead is known, one standard deviation, ms; `LEAD_SIGMA_UNLEARNT_MS` where left out. */
  readonly tapLeadSigmaMs?: { readonly glass: number; readonly wired: number };
  /** One standard deviation of a tap's instant, ms. */
  readonly tapScatterMs: number;
  readonly buttonSide: 'right' | 'left';
}

/** A navigator whose taps nobody has compared with official passings yet. Judgement, no source. */
export const LEAD_SIGMA_UNLEARNT_MS = 200;
