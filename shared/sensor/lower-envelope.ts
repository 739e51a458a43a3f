/**
 * Offset between two clocks from one-way messages. A message is late by a jitter that is never negative, so the least
 * (arrival - stamp) seen is the truest. The two clocks run at slightly different rates, so the least is let rise slowly.
 * Units are the caller's, the same for time and offset.
 */
export interface LowerEnvelope {
  /** Takes in one message: arrival `time` and `offset` = arrival - stamp. Returns the envelope at that time. */
  add(time: number, offset: number): number;
  /** Forgets everything; the next message starts afresh. */
  reset(): void;
  /** The envelope after the last message, null before any. */
  readonly value: number | null;
}

/** @param allowance how fast the envelope may rise, as a fraction (100e-6 = 100 ppm, generous for a plain crystal) */
export function createLowerEnvelope(allowance: number): LowerEnvelope {
  let value: number | null = null;
  let last = 0;
  return {
    add(time, offset) {
      value = value === null ? offset : Math.min(value + allowance * Math.max(0, time - last), offset);
      last = Math.max(last, time);
      return value;
    },
    reset() {
      value = null;
      last = 0;
    },
    get value() {
      return value;
    },
  };
}
