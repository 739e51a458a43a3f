import { describe, expect, it } from 'vitest';
import type { Pack } from '#shared/course/pack.ts';
import { makeDriveRoad } from '#shared/drive/drive-road.ts';
import { BASE_PACK } from './base-pack.ts';

const { courseBook } = BASE_PACK;
const withPositions = courseBook.checkpoints.map((checkpoint, i) => ({ ...checkpoint, position: { lat: 45, lon: -30 + i / 10 } }));
const geometry = [
  { lat: 45, lon: -30, d: -100 },
  { lat: 45.01, lon: -30, d: 1000 },
  { lat: 45.01, lon: -29.98, d: 2500 },
];
const road = (changes: Partial<Pack['courseBook']>, seed = 4) =>
  makeDriveRoad({ ...BASE_PACK, courseBook: { ...courseBook, ...changes } }, seed);

describe('the road of a simulated drive', () => {
  it('is the surveyed line where the book carries one, whatever else it carries', () => {
    const { at } = road({ geometry, checkpoints: withPositions });
    for (const { d, lat, lon } of geometry) expect(at(d)).toMatchObject({ lat: expect.closeTo(lat, 12), lon: expect.closeTo(lon, 12) });
    expect(at(450)).toMatchObject({ lat: expect.closeTo(45.005, 12), lon: -30, course: 0 });
    expect(at(1750)).toMatchObject({ lat: 45.01, lon: expect.closeTo(-29.99, 12), course: 90 });
  });

  it('goes straight on beyond both ends of it', () => {
    const { at } = road({ geometry });
    expect(at(-650).lat).toBeCloseTo(44.995, 12);
    expect(at(3250).lon).toBeCloseTo(-29.97, 12);
  });

  it('runs from place to place where only they have positions, and is the seed’s where nothing has', () => {
    const from = withPositions[0];
    expect(road({ checkpoints: withPositions }).at(0)).toMatchObject(from?.position ?? {});
    expect(road({}, 1).at(5000)).not.toEqual(road({}, 2).at(5000));
    expect(road({}, 1).at(5000)).toEqual(road({}, 1).at(5000));
  });
});
