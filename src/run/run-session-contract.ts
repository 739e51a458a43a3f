import type { Checkpoint } from '#shared/course/course-book.ts';
import type { NewObservation } from '#shared/journal/observation.ts';
import type { RunHeader } from '#shared/journal/run-header.ts';
import type { Readout } from '#shared/pace/readout.ts';
import type { RunState } from '#shared/pace/run.ts';
import type { Result } from '#shared/result.ts';
import type { SensorFailure, SensorSource, SensorStatus } from '#src/sensors/sensor-source.ts';
import type { SessionClock } from './clock.ts';

/** One run on this device: sensors -> engine -> journal. No React in here; the cockpit is a client of this. */
export interface RunSession {
  readonly header: RunHeader;
  /** 'writer' holds the Web Lock and gives out seq; 'reader' shows what the writer publishes and takes over when it dies. May change: see `subscribe`. */
  readonly role: 'writer' | 'reader';
  /** What to show at this moment of the session clock. Cheap enough for every frame. */
  readout(): Readout;
  /** Journals a human act. `eventTimeStamp` is the DOM event's own `timeStamp` (ms); without it, now. */
  act(act: ActOf<NewObservation>, eventTimeStamp?: number): Result<{ readonly seq: number }, RunFailure>;
  attach(source: SensorSource, options: { readonly ask: boolean }): Promise<Result<void, SensorFailure>>;
  detach(): Promise<void>;
  /** Compares clocks with the server now and journals the result. Refused while the car moves unless the class permits a data link. */
  checkClock(): Promise<Result<{ readonly uncertaintyMs: number }, RunFailure>>;
  /** The session clock, for sensor sources and for stamping events. */
  readonly clock: SessionClock;
  status(): RunStatus;
  /** What `of` makes of the state now, such as the run sheet; a session does not carry what few runs ask for. `of` changes nothing. */
  derive<T>(of: (state: RunState, header: RunHeader) => T): T;
  /** The course as it stands now, with everything that was typed in on the grid. Derived; changes only with `subscribe`. */
  course(): CourseNow;
  /** NDJSON of the whole journal, for export without a server. */
  exportJournal(): Promise<string>;
  /** Called after anything other than live figures changed (phase, status, taps, settings); at most once a frame. */
  subscribe(listener: () => void): () => void;
  close(): Promise<void>;
}

/** What the course strip, the grid and the radio words are drawn from. Official distances, as `Readout.distance`, in plain metres. */
export interface CourseNow {
  /** Start to finish. */
  readonly lengthM: number;
  readonly releaseMs: number | null;
  readonly targetTimeMs: number;
  readonly stagedBehindM: number;
  /** Official and own, start, finish and stop board included, in order of distance. */
  readonly places: readonly { readonly checkpoint: Checkpoint; readonly atM: number }[];
  /** Officials' and crew's, in order of `fromM`; limit in m/s. */
  readonly zones: readonly {
    readonly id: string;
    readonly name: string;
    readonly fromM: number;
    readonly toM: number;
    readonly limit: number;
  }[];
  /** Planned time error along the course, seconds, positive = late; a few hundred points at most. */
  readonly plan: readonly { readonly d: number; readonly errorS: number }[];
}

/** An act without its seq and instant: those are the session's to give. */
export type ActOf<T> = T extends unknown ? Omit<T, 'at'> : never;

export interface RunStatus {
  readonly sensor: (SensorStatus & { readonly name: SensorSource['name'] }) | null;
  readonly storage: {
    readonly state: 'writing' | 'saved' | 'failing';
    readonly pending: number;
    readonly message: string | null;
    readonly recovered: 'database' | 'mirror' | null;
  };
  readonly clockRate: number;
  readonly restored: boolean;
}

export interface RunFailure {
  readonly code: 'read-only' | 'closed' | 'no-connection' | 'car-moving';
  readonly message: string;
}
