import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createRandom } from '#shared/drive/random.ts';
import { type ScalePoint, scaleFromRun } from '#shared/pace/learn-scale.ts';

const point = (officialM: number, pulses: number, sigmaM = 3, gnssM = 0): ScalePoint => ({ officialM, pulses, gnssM, sigmaM });
const scale = (points: readonly ScalePoint[], before = 480) => {
  const result = scaleFromRun(points, before);
  if (!result.ok) throw new Error(result.error.message);
  return result.value;
};

describe('next wheel scale from a finished run', () => {
  it('by hand: two places are length over counts; its sigma is both ends, slips and what a wheel repeats to', () => {
    const { mmPerPulse, scaleSigma, source, sentence } = scale([point(0, 100), point(24_055.235, 50_100)]);
    expect(mmPerPulse).toBeCloseTo((24_055_235 / 50_000) * 1, 9);
    expect(scaleSigma).toBeCloseTo(Math.sqrt((2 * 9 + 6e-4 * 24_055.235) / 24_055.235 ** 2 + 0.001 ** 2), 9);
    expect(source).toBe('run');
    expect(sentence).toBe('481.105 mm a pulse ±0.21 %, 0.23 % longer than before, from 2 places over 24.1 km.');
  });

  it('metres that GNSS stood in for are not the wheel’s', () => {
    expect(scale([point(0, 0), point(10_000, 16_000, 3, 2_000)]).mmPerPulse).toBeCloseTo(500, 9);
  });

  it('a place hardly known hardly counts', () => {
    const good = [point(0, 0), point(10_000, 20_000), point(20_000, 40_000)];
    expect(scale([...good, point(15_500, 30_000, 1e5)]).mmPerPulse).toBeCloseTo(500, 4);
  });

  it('a lead common to all places shifts them alike and changes nothing, in any order', () => {
    const places = fc.array(fc.tuple(fc.integer({ min: 0, max: 100_000 }), fc.double({ min: 1, max: 20, noNaN: true })), {
      minLength: 3,
      maxLength: 12,
    });
    fc.assert(
      fc.property(places, fc.double({ min: -20, max: 20, noNaN: true }), (list, shift) => {
        const points = list.map(([m, sigma], i) => point(m + i, Math.round((m + i) / 0.5), sigma));
        const one = scaleFromRun(points, 500);
        fc.pre(one.ok);
        const two = scaleFromRun(points.map((p) => ({ ...p, officialM: p.officialM + shift })).reverse(), 500);
        fc.pre(two.ok);
        expect(two.value.mmPerPulse).toBeCloseTo(one.value.mmPerPulse, 6);
      }),
    );
  });

  it('stated sigma covers: 2000 runs whose wheel changes by 0.1 % until the next one', () => {
    const random = createRandom(11, 'scales');
    let inside = 0;
    for (let n = 0; n < 2000; n++) {
      const today = 500 * (1 + random.gauss(0.003));
      const next = today * (1 + random.gauss(0.001));
      let slipped = 0;
      const points = [0, 12, 27, 45, 60, 78, 92, 108, 120].map((km, i) => {
        slipped += i === 0 ? 0 : random.gauss(Math.sqrt(6e-4 * 13_300));
        const official = km * 1000 + random.gauss(i === 0 ? 0.3 : 5.4);
        return point(official, Math.round(((km * 1000 + slipped) * 1000) / today), i === 0 ? 0.3 : 5.4);
      });
      const learnt = scale(points, 500);
      if (Math.abs(next / learnt.mmPerPulse - 1) < 2 * learnt.scaleSigma) inside++;
    }
    expect(inside / 2000).toBeGreaterThan(0.93);
    expect(inside / 2000).toBeLessThan(0.98);
  });

  it.each([
    ['nothing', [], 'TOO_SHORT'],
    ['one place', [point(0, 0)], 'TOO_SHORT'],
    ['half a kilometre', [point(0, 0), point(500, 1_000)], 'TOO_SHORT'],
    ['all by GNSS', [point(0, 0), point(5_000, 0, 3, 5_000)], 'TOO_SHORT'],
    ['pulses running back', [point(0, 100), point(5_000, 50)], 'NOT_FORWARD'],
    ['no pulses at all', [point(0, 100), point(5_000, 100)], 'NOT_FORWARD'],
  ])('%s is a typed fault', (_, points, code) => {
    const result = scaleFromRun(points, 500);
    expect(result.ok ? null : result.error.code).toBe(code);
  });
});
