import type { SurveyedPoint } from '#shared/course/course-book.ts';
import { inventRoad } from '#shared/drive/drive-road.ts';

/** The demo's one road, invented in the middle of an ocean, with the bends of a real one. Metres from its morning start. */
const road = inventRoad(3);
const STEP_M = 50;
/** Seven decimals of a degree are a centimetre. */
const PER_DEGREE = 1e7;
const rounded = (degrees: number): number => Math.round(degrees * PER_DEGREE) / PER_DEGREE;

export function demoPosition(m: number): { readonly lat: number; readonly lon: number } {
  const { lat, lon } = road.at(m);
  return { lat: rounded(lat), lon: rounded(lon) };
}

/** The surveyed line over official distances `from` to `to`; `roadAt` says where on the road an official distance lies. */
export function surveyedLine(from: number, to: number, roadAt: (d: number) => number): readonly SurveyedPoint[] {
  return Array.from({ length: Math.ceil((to - from) / STEP_M) + 1 }, (_, i) => {
    const d = from + i * STEP_M;
    return { ...demoPosition(roadAt(d)), d };
  });
}
