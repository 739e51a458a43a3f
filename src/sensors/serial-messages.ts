import type { NewObservation } from '#shared/journal/observation.ts';
import type { SensorFailure, SensorStatus } from './sensor-source.ts';
import type { SerialPortInfo } from './web-serial.ts';

/**
 * Between page and serial worker. The worker's instants are microseconds of its own clock times the session clock's rate;
 * the page adds the session instant of the worker's zero.
 */
export type ToSerialWorker =
  | {
      readonly type: 'open';
      readonly baudRate: number;
      readonly chosen: SerialPortInfo | null;
      readonly rate: number;
      readonly dateFloorMs: number;
    }
  | { readonly type: 'close' }
  | { readonly type: 'probe'; readonly id: number };

export type FromSerialWorker =
  | { readonly type: 'opened' }
  | { readonly type: 'open-failed'; readonly failure: SensorFailure }
  | { readonly type: 'closed' }
  /** The worker's stamp, ms, as asked for by the probe. */
  | { readonly type: 'stamp'; readonly id: number; readonly stamp: number }
  | { readonly type: 'observations'; readonly observations: readonly NewObservation[] }
  | { readonly type: 'status'; readonly status: SensorStatus };

/** A worker as the page sees it. */
export interface SerialWorker {
  postMessage(message: ToSerialWorker): void;
  listen(listener: (message: FromSerialWorker) => void, broken: () => void): void;
  terminate(): void;
}
