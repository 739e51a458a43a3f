import type { NewObservation } from '#shared/journal/observation.ts';
import type { Result } from '#shared/result.ts';

/** Where observations come from. One contract suite covers every implementation. */
export interface SensorSource {
  readonly name: 'serial' | 'geolocation' | 'simulator';
  /** Begins delivering. Resolves once listening; asks for permission only when `ask` is set (needs a touch). */
  open(listener: SensorListener, options: { readonly ask: boolean }): Promise<Result<void, SensorFailure>>;
  /** Stops delivering; nothing arrives afterwards. May be opened again. */
  close(): Promise<void>;
}

export interface SensorListener {
  /** In order of arrival; each carries its own instant on the session clock. */
  observed(observations: readonly NewObservation[]): void;
  status(status: SensorStatus): void;
}

export interface SensorStatus {
  readonly state: 'closed' | 'opening' | 'live' | 'silent' | 'lost';
  readonly goodLines: number;
  readonly garbledLines: number;
  readonly failure: SensorFailure | null;
}

export type SensorFailureCode = 'unsupported' | 'none-chosen' | 'in-use' | 'lost' | 'garbled' | 'denied';
export interface SensorFailure {
  readonly code: SensorFailureCode;
  /** Tells the person what to do. */
  readonly message: string;
}
