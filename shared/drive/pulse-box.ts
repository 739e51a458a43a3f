import type { NewObservation } from '#shared/journal/observation.ts';
import { WRAP } from '#shared/sensor/pulse-sentence.ts';
import { createRandom } from './random.ts';

/** A pulse box: counts whole pulses and reports the count with the instant of the newest one, by a clock of its own. */
export interface PulseBox {
  /** The wheel made so many pulses (with a fraction) between two session instants, microseconds. */
  turn(pulses: number, from: number, to: number): NewObservation[];
}

/** Counters to go on from. */
export interface PulseBoxStart {
  readonly count: number;
  readonly boxUs: number;
}

const REPORT_US = 20_000;
/** At the first report and while no pulse comes the box repeats its count, so that it is known to be alive. */
const ALIVE_US = 1_000_000;
const CLOCK_SIGMA = 20e-6;

export function createPulseBox(channel: number, seed: number, beginAt: number, start?: PulseBoxStart): PulseBox {
  const random = createRandom(seed, 'box');
  const rate = 1 + random.gauss(CLOCK_SIGMA);
  const [bootCount, bootUs] = [Math.floor(random.range(0, WRAP)), Math.floor(random.range(0, WRAP))];
  const [firstCount, firstUs] = start === undefined ? [bootCount, bootUs] : [start.count, start.boxUs];
  let turned = 0;
  let newest = beginAt;
  let reported = { whole: 0, at: beginAt - ALIVE_US };

  const report = (at: number): NewObservation => {
    reported = { whole: Math.floor(turned), at };
    const boxUs = Math.floor(firstUs + (at - beginAt) * rate) % WRAP;
    return { type: 'pulse.v1', at: Math.round(at), channel, count: (firstCount + Math.floor(turned)) % WRAP, boxUs };
  };

  return {
    turn(pulses, from, to) {
      const before = turned;
      turned += pulses;
      if (Math.floor(turned) > Math.floor(before)) newest = from + ((to - from) * (Math.floor(turned) - before)) / pulses;
      if (Math.floor(turned) > reported.whole && (to - beginAt) % REPORT_US === 0) return [report(newest)];
      return to - reported.at >= ALIVE_US ? [report(to)] : [];
    },
  };
}
