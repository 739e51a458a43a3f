import fc from 'fast-check';
import { Geodesic } from 'geographiclib-geodesic';
import { describe, expect, it } from 'vitest';
import type { SurveyedPoint } from '#shared/course/course-book.ts';
import { type CourseLine, courseLineOf, type Placed, project } from '#shared/pace/course-line.ts';

/** Lines laid out by GeographicLib's own direct problem: heading and metres from point to point. */
function laid(steps: readonly (readonly [heading: number, metres: number])[], from = { lat: 54.3, lon: -7.1 }): SurveyedPoint[] {
  const points: SurveyedPoint[] = [{ ...from, d: 0 }];
  for (const [heading, metres] of steps) {
    const last = points[points.length - 1] as SurveyedPoint;
    const there = Geodesic.WGS84.Direct(last.lat, last.lon, heading, metres);
    points.push({ lat: there.lat2 as number, lon: there.lon2 as number, d: last.d + metres });
  }
  return points;
}

const lineOf = (points: readonly SurveyedPoint[]): CourseLine => courseLineOf(points) as CourseLine;
/** The place `along` metres after point i, `right` of the line. */
function beside(points: readonly SurveyedPoint[], i: number, along: number, right: number): { lat: number; lon: number; heading: number } {
  const [a, b] = [points[i] as SurveyedPoint, points[i + 1] as SurveyedPoint];
  const heading = Geodesic.WGS84.Inverse(a.lat, a.lon, b.lat, b.lon).azi1 as number;
  const on = Geodesic.WGS84.Direct(a.lat, a.lon, heading, along);
  const off = Geodesic.WGS84.Direct(on.lat2 as number, on.lon2 as number, (on.azi2 as number) + 90, right);
  return { lat: off.lat2 as number, lon: off.lon2 as number, heading };
}
const fixAt = ({ lat, lon }: { lat: number; lon: number }, course: number | null = null, sigma = 2): Placed => ({
  lat,
  lon,
  course,
  speed: 30,
  sigma,
});

/** 150 km that turn about, 250 m a segment. */
const long = laid(Array.from({ length: 600 }, (_, i) => [60 + 50 * Math.sin(i / 40), 250] as const));

describe('a surveyed line', () => {
  it('gives back distance and offset to centimetres, anywhere along 150 km', () => {
    const line = lineOf(long);
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 598 }),
        fc.double({ min: 20, max: 230, noNaN: true }),
        fc.double({ min: -12, max: 12, noNaN: true }),
        fc.double({ min: -150, max: 150, noNaN: true }),
        (i, along, right, off) => {
          const there = beside(long, i, along, right);
          const d = i * 250 + along;
          const found = project(line, fixAt(there, there.heading), d + off, 400);
          expect(found).not.toBeNull();
          // a bend of 1.3° beside the line shifts the foot by 0.28 m where another segment is as near
          expect(Math.abs((found?.d as number) - d)).toBeLessThan(0.02 + Math.abs(right) * 0.05);
          expect(Math.abs((found?.cross as number) - right)).toBeLessThan(0.1);
        },
      ),
      { numRuns: 200 },
    );
    const mid = beside(long, 300, 125, 4);
    const exact = project(line, fixAt(mid), 75_100, 400);
    expect(Math.abs((exact?.d as number) - 75_125)).toBeLessThan(0.01);
    expect(Math.abs((exact?.cross as number) - 4)).toBeLessThan(0.01);
  });

  it('stands for the official distance where the survey reads otherwise than the ellipsoid', () => {
    const scaled = long.map((p) => ({ ...p, d: p.d * 1.002 }));
    const found = project(lineOf(scaled), fixAt(beside(scaled, 100, 50, 0)), 25_100, 400);
    expect(Math.abs((found?.d as number) - 25_050 * 1.002)).toBeLessThan(0.01);
  });

  it('tells the way back along the same road from the way out by the expected distance, and by the course', () => {
    const out = Array.from({ length: 40 }, () => [80, 100] as const);
    const points = laid([...out, ...out.map(([h, m]) => [h + 180, m] as const)]);
    const line = lineOf(points);
    const there = beside(points, 20, 50, 2);
    expect(project(line, fixAt(there), 2_100, 400)?.d).toBeCloseTo(2_050, 0);
    expect(project(line, fixAt(there), 5_900, 400)?.d).toBeCloseTo(5_950, 0);
    // 100 m before the turn both are in reach: which way it goes decides
    const near = beside(points, 38, 50, 2);
    expect(project(line, fixAt(near, 80), 4_000, 400)?.d).toBeCloseTo(3_850, 0);
    expect(project(line, fixAt(near, 260), 4_000, 400)?.d).toBeCloseTo(4_150, 0);
  });

  it('does not jump across a hairpin', () => {
    const points = laid([
      ...Array.from({ length: 10 }, () => [90, 20] as const),
      [180, 12],
      ...Array.from({ length: 10 }, () => [270, 20] as const),
    ]);
    const line = lineOf(points);
    // 6 m towards the other leg, which is 12 m away: as near to both
    const between = beside(points, 3, 10, 6);
    expect(project(line, { ...fixAt(between), speed: 3 }, 72, 400)?.d).toBeCloseTo(70, 0);
    expect(project(line, fixAt(between, 270), 330, 400)?.d).toBeCloseTo(342, 0);
  });

  it('refuses what lies off the road, goes across it, or lies before the first point or past the last', () => {
    const line = lineOf(long);
    expect(project(line, fixAt(beside(long, 50, 100, 26)), 12_600, 400)).toBeNull();
    // 95 % radius of 12.2 m: three of them reach further than 25 m
    expect(project(line, fixAt(beside(long, 50, 100, 26), null, 5), 12_600, 400)?.d).toBeCloseTo(12_600, 0);
    const there = beside(long, 50, 100, 0);
    expect(project(line, fixAt(there, there.heading + 90), 12_600, 400)).toBeNull();
    expect(project(line, fixAt(there), 30_000, 400)).toBeNull();
    expect(project(line, fixAt(beside(long, 0, -20, 0)), 0, 400)).toBeNull();
    expect(project(line, fixAt(beside(long, 599, 270, 0)), 150_000, 400)).toBeNull();
    expect(courseLineOf([])).toBeNull();
    expect(courseLineOf(undefined)).toBeNull();
  });
});
