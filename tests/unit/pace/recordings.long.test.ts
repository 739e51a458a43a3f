import { existsSync, readFileSync } from 'node:fs';
import { Geodesic } from 'geographiclib-geodesic';
import { describe, expect, it } from 'vitest';
import type { Pack } from '#shared/course/pack.ts';
import type { NewObservation } from '#shared/journal/observation.ts';
import { journal } from '#tests/unit/pace/drives.ts';
import { fold, leg, sheetOf } from '#tests/unit/pace/folds.ts';
import { km, pack, place } from '#tests/unit/pace/packs.ts';

/**
 * Recorded drives that nobody on this project made (skipped where they are absent). One wheel repeats within 0.15–0.40 % over
 * the same gates; positions repeat within 0.05 %.
 */
const RECORDINGS = new URL('../../../../shared/data/', import.meta.url);
const DATA = new URL('wheel_gnss/', RECORDINGS);
/** Part of a title: says why nothing ran. */
const orSkipped = (folder: URL): string => (existsSync(folder) ? '' : ' (skipped: the recordings are not beside this repository)');
const rows = (file: string): string[][] =>
  readFileSync(new URL(file, DATA), 'utf8')
    .split('\n')
    .filter((line) => line !== '' && !line.startsWith('#'))
    .map((line) => line.split(','));

interface Passing {
  readonly t: number;
  readonly metres: number;
}

/** Geodesic distance along one receiver's positions by GeographicLib, with the host's time. */
function path(file: string, receiver: string): Passing[] {
  const list: Passing[] = [];
  let last: [number, number] | null = null;
  for (const [rx, host, , lat, lon] of rows(file)) {
    if (rx !== receiver) continue;
    const here: [number, number] = [Number(lat), Number(lon)];
    const step = last === null ? 0 : (Geodesic.WGS84.Inverse(last[0], last[1], here[0], here[1]).s12 as number);
    list.push({ t: Number(host), metres: (list.at(-1)?.metres ?? 0) + step });
    last = here;
  }
  return list;
}

function timeAt(list: readonly Passing[], metres: number): number {
  const i = list.findIndex((p) => p.metres >= metres);
  const [a, b] = [list[i - 1] as Passing, list[i] as Passing];
  return a.t + ((metres - a.metres) / (b.metres - a.metres)) * (b.t - a.t);
}

const at = (t: number): number => Math.round(t * 1e6) + 10_000_000;

const highway = new URL('highway/', DATA);
describe.skipIf(!existsSync(highway))(`highway drives, encoder at 100 Hz${orSkipped(highway)}`, () => {
  it.each(['highway/2024-07-11-12-41-42', 'highway/2024-07-11-14-34-05'])(
    '%s: a scale corrected halfway meets the finish within what one wheel repeats',
    (drive) => {
      const gnss = path(`${drive}_gnss.csv`, 'RightRear');
      const begin = gnss[0] as Passing;
      const encoder = rows(`${drive}_encoder.csv`).slice(1);
      // the second channel is the one that counts upwards
      const counts = encoder.map(([t, , c2]): NewObservation => {
        return { type: 'pulse.v1', at: at(Number(t)), channel: 0, count: Number(c2) >>> 0, boxUs: at(Number(t)) % 2 ** 32 };
      });
      const release = begin.t + 2;
      const from = gnss.find((p) => p.t >= release) as Passing;
      const book = [
        place('start', 'start', '0.000'),
        place('settle', 'settle', '2.000'),
        place('half', 'scale', '7.000'),
        place('finish', 'finish', '12.000'),
      ];
      const p: Pack = {
        ...pack,
        courseBook: { ...pack.courseBook, checkpoints: book },
        raceClass: {
          ...pack.raceClass,
          targetTimeMs: 500_000,
          sections: [{ kind: 'average', to: km('12.000'), average: { text: '86.4', unit: 'km/h' } }],
          aids: { wheel: true, gnssSpeed: false, gnssPosition: false, dataLink: false },
        },
        // half a percent off, so that the correction has something to do
        wheel: { ...pack.wheel, mmPerPulse: (1000 / 20_180) * 1.005 },
      };
      const clock: NewObservation = {
        type: 'clock.v1',
        at: at(from.t),
        source: 'exchange',
        officialMs: p.attempt.releaseMs as number,
        uncertaintyMs: 5,
      };
      const touch = (metres: number): NewObservation => ({
        type: 'tap.v1',
        at: at(timeAt(gnss, from.metres + metres)),
        input: 'glass',
        checkpoint: null,
      });
      const observations = journal([clock], counts, [touch(2_000), touch(7_000)]);
      const sheet = sheetOf(p, observations);
      expect(leg(sheet, 'settle').by).toBe('tap');
      expect(leg(sheet, 'half')).toMatchObject({ by: 'tap', scaleKept: null });
      const truth = timeAt(gnss, from.metres + 12_000) - from.t;
      // 0.4 % of the last 5 km at about 24 m/s
      expect(Math.abs((sheet.finish?.elapsedS as number) - truth)).toBeLessThan((0.004 * 5_000) / 24);
      expect(leg(sheet, 'half').scaleAfter / (1000 / 20_180)).toBeCloseTo(1, 2);
    },
  );
});

const track = new URL('track/', DATA);
describe.skipIf(!existsSync(track))(`test track with an all-zero record${orSkipped(track)}`, () => {
  it('loses and invents nothing: the same distance as without that record', () => {
    const encoder = readFileSync(new URL('track/_slash_parseEncoder.csv', DATA), 'utf8')
      .split('\n')
      .slice(1)
      .filter((l) => l !== '');
    const t0 = Number(encoder[0]?.slice(0, 19)) / 1e9;
    const counts = encoder.map((line): NewObservation & { zero: boolean } => {
      const cells = line.split(',');
      const instant = at(Number(cells[0]) / 1e9 - t0);
      return {
        type: 'pulse.v1',
        at: instant,
        channel: 0,
        count: Number(cells[11]) >>> 0,
        boxUs: instant % 2 ** 32,
        zero: cells[10] === '0' && cells[11] === '0',
      };
    });
    expect(counts.filter((o) => o.zero)).toHaveLength(1);
    const p: Pack = { ...pack, wheel: { ...pack.wheel, mmPerPulse: 1000 / 20_180 } };
    const all = fold(p, journal(counts));
    const without = fold(p, journal(counts.filter((o) => !o.zero)));
    expect(all.odometer.wheel.total).toBe(without.odometer.wheel.total);
    expect(all.odometer.wheel.wild).toBe(1);
    // geodesic length of the drive: 1303 m; the encoder was switched on 1.1 s before the receiver, at 35 km/h, and off later
    const metres = (all.odometer.wheel.total * p.wheel.mmPerPulse) / 1000;
    expect(Math.abs(metres - 1303) / 1303).toBeLessThan(0.02);
  });
});

const survey = new URL('gnss/I99_StateCollege73_to_Altoona33_20210123.csv', RECORDINGS);
describe.skipIf(!existsSync(survey))(`45 minutes of motorway, receiver at 20 Hz${orSkipped(survey)}`, () => {
  const fixes = (): NewObservation[] =>
    rows('../gnss/I99_StateCollege73_to_Altoona33_20210123.csv')
      .slice(1)
      .map(([t, lat, lon, , speed]) => ({
        type: 'fix.v1',
        at: at(Number(t) - 587_566),
        via: 'nmea',
        lat: Number(lat),
        lon: Number(lon),
        speed: Number(speed),
        course: null,
        accuracy: null,
        utcMs: null,
      }));
  const metres = (gnssSpeed: boolean): number => {
    const p: Pack = {
      ...pack,
      raceClass: { ...pack.raceClass, aids: { wheel: false, gnssSpeed, gnssPosition: !gnssSpeed, dataLink: false } },
    };
    return fold(p, journal(fixes())).odometer.gnss.metres;
  };

  it('integrates ground speed to the trapezoid of the reported speeds, 69 540.5 m, less the creeping it reports at rest', () => {
    const less = 69_540.5 - metres(true);
    // minutes at 0.02 m/s before and after the drive
    expect(less).toBeGreaterThan(0);
    expect(less).toBeLessThan(6);
  });

  it('adds lines between positions to within 0.01 % of the geodesic length: 69 551.0 m by GeodSolve', () => {
    expect(Math.abs(metres(false) - 69_551)).toBeLessThan(7);
  });
});
