import type { NewObservation, PulseV1 } from '#shared/journal/observation.ts';
import { micros } from '#shared/units.ts';
import { type BoxMemory, type BoxSample, boxShift } from './box-bridge.ts';
import type { SessionClock } from './clock.ts';
import { epochNow } from './epoch.ts';

/**
 * After a gap in the page's life the session clock is a guess until the pulse box is heard again. The first pulses are held
 * back for a moment, so that they can be given the right instants; without a box, or without a memory of it, nothing is held.
 */
export interface GapWatch {
  /** A gap may have begun: the next pulses are to be compared with those before it. `sure`: it did, so the box's word is journalled whatever it is. */
  arm(sure: boolean): void;
  /** True while it holds `observations` back. */
  hold(observations: readonly NewObservation[]): boolean;
  /** What is held, at its right instants, the epoch that says so first. Moves the clock. */
  settle(): readonly NewObservation[];
}

/** A shift that is within what a line's way varies by is none. */
const LEAST_SHIFT_US = 20_000;

export function createGapWatch(clock: SessionClock, box: BoxMemory, epoch: () => number): GapWatch {
  let before: readonly BoxSample[] = [];
  let held: NewObservation[] = [];
  let armed = false;
  let certain = false;
  return {
    arm(sure) {
      if (held.length > 0) return;
      certain = sure || (armed && certain);
      before = box.recent();
      armed = before.length > 0;
    },
    hold(observations) {
      if (!armed || (held.length === 0 && !observations.some(isPulse))) return false;
      held.push(...observations);
      return true;
    },
    settle() {
      const waiting = held;
      held = [];
      if (waiting.length === 0) return waiting;
      armed = false;
      const found = boxShift(before, waiting.filter(isPulse));
      if (found === null) return waiting;
      const shiftUs = Math.abs(found.shiftUs) < LEAST_SHIFT_US ? 0 : found.shiftUs;
      if (shiftUs === 0 && !certain) return waiting;
      clock.shift(shiftUs);
      const moved = waiting.map((o) => ({ ...o, at: micros(o.at + shiftUs) }));
      return [epochNow(clock, epoch(), 'box', found.uncertaintyMs), ...moved];
    },
  };
}

const isPulse = (o: NewObservation): o is Omit<PulseV1, 'seq'> => o.type === 'pulse.v1';
