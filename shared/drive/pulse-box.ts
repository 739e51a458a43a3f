import type { NewObservation } from '#shared/journal/observation.ts';
import { WRAP } from '#shared/sensor/pulse-sentence.ts';
import { createRandom, type Random } from './random.ts';

/** A pulse box: counts whole pulses and reports the count with the instant of the newest one, by a clock of its own. */
export interface PulseBox {
  /** The wheel made so many pulses (with a fraction) between two session instants, microseconds; new counts are reported when `due`. */
  turn(pulses: number, from: number, to: number, due: boolean): NewObservation | null;
}

/** Counters to go on from. */
export interface PulseBoxStart {
  readonly count: number;
  readonly boxUs: number;
}

/** At the first report and while no pulse comes the box repeats its count, so that it is known to be alive. */
const ALIVE_US = 1_000_000;
const CLOCK_SIGMA = 20e-6;

/** @param random a box's two channels share its clock, not their counts: give each a generator begun from the same name */
export function createPulseBox(channel: number, random: Random, beginAt: number, start?: PulseBoxStart): PulseBox {
  const rate = 1 + random.gauss(CLOCK_SIGMA);
  const [bootCount, bootUs] = [Math.floor(random.range(0, WRAP)), Math.floor(random.range(0, WRAP))];
  const [firstCount, firstUs] = start === undefined ? [bootCount, bootUs] : [start.count, start.boxUs];
  let turned = 0;
  let newest = beginAt;
  let reportedWhole = 0;
  let reportedAt = beginAt - ALIVE_US;

  const report = (at: number): NewObservation => {
    reportedWhole = Math.floor(turned);
    reportedAt = at;
    const boxUs = Math.floor(firstUs + (at - beginAt) * rate) % WRAP;
    return { type: 'pulse.v1', at: Math.round(at), channel, count: (firstCount + reportedWhole) % WRAP, boxUs };
  };

  return {
    turn(pulses, from, to, due) {
      const before = turned;
      turned += pulses;
      const whole = Math.floor(turned);
      if (whole > Math.floor(before)) newest = from + ((to - from) * (whole - before)) / pulses;
      if (due && whole > reportedWhole) return report(newest);
      return to - reportedAt >= ALIVE_US ? report(to) : null;
    },
  };
}

/** The box's own generator. */
export const boxRandom = (seed: number): Random => createRandom(seed, 'box');
