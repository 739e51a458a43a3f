import type { Pack } from '#shared/course/pack.ts';
import type { NewObservation, Observation } from '#shared/journal/observation.ts';
import { RELEASE_US } from '#tests/unit/pace/drives.ts';
import { pack as demo, km, place } from '#tests/unit/pace/packs.ts';

/**
 * A run of any length as a journal: wheel at 100 Hz, GNSS once a second, the clock once a minute, five touches. The speed wavers
 * about the average, so that the advice has work to do.
 */

const AVERAGE = 36;
const WAVER_M = 12;
const WAVER_S = 11;
const METRES_PER_PULSE = 0.25;
/** A sixth of the course, an hour's or twelve hours'. */
const placeEvery = (hours: number): number => AVERAGE * 600 * hours;

/** The course of a run of so many hours: five checkpoints, a zone after every second one. */
export function longPack(hours: number): Pack {
  const length = AVERAGE * 3600 * hours;
  const every = placeEvery(hours);
  const text = (metres: number): string => (metres / 1000).toFixed(3);
  const places = Array.from({ length: 5 }, (_, i) => place(`p${i}`, i === 0 ? 'settle' : 'scale', text((i + 1) * every)));
  const zones = places.flatMap(({ id }, i) =>
    i % 2 === 0
      ? []
      : [
          {
            id: `z${id}`,
            name: `Zone ${id}`,
            from: km(text((i + 1) * every + 900)),
            to: km(text((i + 1) * every + 1_500)),
            limit: { text: '120', unit: 'km/h' as const },
            source: 'crew' as const,
          },
        ],
  );
  return {
    ...demo,
    courseBook: {
      ...demo.courseBook,
      checkpoints: [place('start', 'start', '0.000'), ...places, place('finish', 'finish', text(length))],
    },
    raceClass: {
      ...demo.raceClass,
      targetTimeMs: hours * 3_600_000,
      sections: [{ kind: 'average', to: km(text(length)), average: { text: String(AVERAGE * 3.6), unit: 'km/h' } }],
    },
    crewZones: zones,
    settings: { ...demo.settings, scaleRule: 'estimator' },
  };
}

const metresAt = (t: number): number => (t <= 0 ? 0 : AVERAGE * (t - 7 * (1 - Math.exp(-t / 7))) + WAVER_M * (1 - Math.cos(t / WAVER_S)));
const atOf = (t: number): number => Math.round(RELEASE_US + t * 1e6);
const SECONDS_BEFORE = 30;

/** In order of instant, numbered; one at a time, so that the run itself takes no memory. */
export function* longRun(pack: Pack, seconds: number): Generator<Observation> {
  let seq = 0;
  const every = placeEvery(seconds / 3600);
  const next = (o: NewObservation): Observation => ({ ...o, seq: seq++ }) as Observation;
  const releaseMs = pack.attempt.releaseMs as number;
  for (let i = -SECONDS_BEFORE * 100; i <= seconds * 100; i++) {
    const t = i / 100;
    const at = atOf(t);
    const boxUs = (at + 4_000_000_000) % 2 ** 32;
    yield next({ type: 'pulse.v1', at, channel: 0, count: Math.floor(metresAt(t) / METRES_PER_PULSE), boxUs });
    if (i % 100 !== 50) continue;
    const speed = (metresAt(t + 0.01) - metresAt(t - 0.01)) / 0.02;
    yield next({ type: 'fix.v1', at, via: 'nmea', lat: null, lon: null, speed, course: null, accuracy: null, utcMs: null });
    if (i % 6_000 === 50)
      yield next({ type: 'clock.v1', at, source: 'exchange', officialMs: releaseMs + t * 1000 + (i % 7) / 10, uncertaintyMs: 5 });
    if (Math.floor(metresAt(t) / every) > Math.floor(metresAt(t - 1) / every)) yield next(touch(t, every));
  }
}

/** The touch at the place passed within the last second. */
function touch(t: number, every: number): NewObservation {
  const d = Math.floor(metresAt(t) / every) * every;
  let [low, high] = [t - 1, t];
  for (let i = 0; i < 40; i++) {
    const middle = (low + high) / 2;
    if (metresAt(middle) < d) low = middle;
    else high = middle;
  }
  return { type: 'tap.v1', at: atOf(high), input: 'glass', checkpoint: null };
}
