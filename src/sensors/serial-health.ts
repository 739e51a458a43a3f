import type { SensorFailure, SensorStatus } from './sensor-source.ts';
import { serialFailure } from './serial-failures.ts';

/** What the worker reports of the line: live, silent, lost, unreadable. Told about bytes and time, asks nobody. */
export interface SerialHealth {
  opened(now: number): void;
  bytes(now: number): void;
  lost(): void;
  /** Called regularly with the line's counts; `now` ms. */
  tick(now: number, goodLines: number, garbledLines: number): SensorStatus;
}

const SILENT_MS = 2000;
/** A line with nothing but garbage for this long is being read at the wrong speed, or is no pulse box. */
const GARBLED_MS = 5000;
const GARBLED_LINES = 10;

export function createSerialHealth(): SerialHealth {
  let state: SensorStatus['state'] = 'opening';
  let heard = 0;
  let failure: SensorFailure | null = null;
  let mark = { at: 0, good: 0, garbled: 0 };

  const judgeGarble = (now: number, good: number, garbled: number): void => {
    if (good > mark.good) {
      mark = { at: now, good, garbled };
      if (failure?.code === 'garbled') failure = null;
    } else if (now - mark.at >= GARBLED_MS && garbled - mark.garbled >= GARBLED_LINES) failure = serialFailure('garbled');
  };

  return {
    opened(now) {
      state = 'opening';
      heard = now;
      failure = null;
      mark = { ...mark, at: now };
    },
    bytes(now) {
      state = 'live';
      heard = now;
    },
    lost() {
      state = 'lost';
      failure = serialFailure('lost');
    },
    tick(now, goodLines, garbledLines) {
      if (state !== 'lost') {
        judgeGarble(now, goodLines, garbledLines);
        if (now - heard >= SILENT_MS) state = 'silent';
      }
      return { state, goodLines, garbledLines, failure };
    },
  };
}
