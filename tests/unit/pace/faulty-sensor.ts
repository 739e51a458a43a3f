import type { PulseV1 } from '#shared/journal/observation.ts';
import { makeOdometer, type Odometer } from '#shared/pace/odometer.ts';
import { type Now, odometerNow } from '#shared/pace/odometer-now.ts';
import { takePulse, type WheelChannels } from '#shared/pace/wheel-source.ts';
import type { Motion } from '#tests/unit/pace/drives.ts';

/** Records of a wheel whose sensor has faults, straight into the odometer: no course, no clock. Seconds from 0 on. */

export interface Sensor {
  readonly hz: number;
  readonly metresPerPulse: number;
  /** Part of a pulse that the wheel had turned at first, 0..1. */
  readonly phase?: number;
  /** While these last, pulses are not counted. */
  readonly misses?: readonly (readonly [from: number, to: number])[];
  /** While these last, no record comes. */
  readonly silent?: readonly (readonly [from: number, to: number])[];
  /** The count goes up and down by one with every other record. */
  readonly dithers?: boolean;
  /** 1, or −1 for a sensor mounted mirrored. */
  readonly sign?: number;
  readonly channel?: number;
  /** Seconds by which records are late or early, by the second. */
  readonly jitter?: (t: number) => number;
}

const T0 = 50_000_000;
const us = (t: number): number => Math.round(t * 1e6) + T0;

export function records(motion: Motion, until: number, sensor: Sensor): PulseV1[] {
  const { hz, metresPerPulse, phase = 0, misses = [], silent = [], dithers = false, sign = 1, channel = 0, jitter = () => 0 } = sensor;
  const passed = (t: number): number => Math.floor(motion.metresAt(t) / metresPerPulse + phase + 1e-9);
  const list: PulseV1[] = [];
  for (let i = 0; i <= until * hz; i++) {
    const t = i / hz;
    if (silent.some(([from, to]) => t > from && t < to)) continue;
    const missed = misses.reduce((n, [from, to]) => n + (t <= from ? 0 : passed(Math.min(t, to)) - passed(from)), 0);
    const count = (sign * (passed(t) - missed) + (dithers ? i % 2 : 0)) >>> 0;
    const at = us(t + jitter(t));
    list.push({ type: 'pulse.v1', at, channel, count, boxUs: us(t) % 2 ** 32, seq: list.length });
  }
  return list;
}

const AIDS = { wheel: true, gnssSpeed: false, gnssPosition: false, dataLink: false };

export function roll(
  lists: readonly PulseV1[],
  metresPerPulse: number,
  wheel: WheelChannels = { channel: 0 },
  o = makeOdometer(),
): Odometer {
  o.track.perCount = metresPerPulse;
  for (const record of lists) takePulse(o, record, wheel, AIDS, metresPerPulse);
  return o;
}

/** Metres the odometer shows at times, each with what had come by then. */
export function shown(
  list: readonly PulseV1[],
  metresPerPulse: number,
  times: readonly number[],
  wheel: WheelChannels = { channel: 0 },
): (Now & { metres: number })[] {
  const o = makeOdometer();
  o.track.perCount = metresPerPulse;
  let i = 0;
  return times.map((t) => {
    for (; i < list.length && (list[i] as PulseV1).at <= us(t); i++) takePulse(o, list[i] as PulseV1, wheel, AIDS, metresPerPulse);
    const now = odometerNow(o, us(t), metresPerPulse);
    return { ...now, metres: now.w * metresPerPulse };
  });
}

export const metresOf = (o: Odometer, metresPerPulse: number): number => o.w * metresPerPulse;

/** In order of instant; of equal ones the first list's first. */
export const merged = (...lists: readonly (readonly PulseV1[])[]): PulseV1[] => lists.flat().sort((a, b) => a.at - b.at);

/** Pieces of steady acceleration from rest: seconds and m/s² each; the last speed goes on. */
export function pieces(...parts: readonly (readonly [seconds: number, acceleration: number])[]): Motion {
  return {
    metresAt(t) {
      let [left, v, x] = [Math.max(0, t), 0, 0];
      for (const [seconds, a] of parts) {
        const dt = Math.min(left, seconds);
        x += v * dt + 0.5 * a * dt * dt;
        v = Math.max(0, v + a * dt);
        left -= dt;
      }
      return x + v * left;
    },
  };
}
