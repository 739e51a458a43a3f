import { printedMetres } from '#shared/course/convert.ts';
import type { CourseBook, SurveyedPoint } from '#shared/course/course-book.ts';
import type { Pack } from '#shared/course/pack.ts';
import { createRandom } from './random.ts';

/** Where the road runs, by official distance. WGS84 degrees; course in degrees true, 0..360. */
export interface DriveRoad {
  at(distance: number): { readonly lat: number; readonly lon: number; readonly course: number };
}

const RADIANS = Math.PI / 180;
/** Metres per degree of latitude at 45 degrees on WGS84; the simulator needs no better. */
export const METRES_PER_DEGREE = 111_132;
export const metresPerDegreeOfLongitude = (lat: number): number => METRES_PER_DEGREE * Math.cos(lat * RADIANS);

interface Node {
  readonly distance: number;
  readonly lat: number;
  readonly lon: number;
}

/**
 * Along the surveyed line where the book carries one; else straight from checkpoint to checkpoint where at least two have
 * positions, else an invented road on open water.
 */
export function makeDriveRoad({ courseBook }: Pack, seed: number): DriveRoad {
  const surveyed = courseBook.geometry?.map(({ d: distance, lat, lon }): Node => ({ distance, lat, lon })) ?? [];
  const nodes = surveyed.length >= 2 ? surveyed : checkpointNodes(courseBook);
  return nodes.length >= 2 ? roadThrough((distance) => pairAround(nodes, distance)) : inventRoad(seed);
}

const checkpointNodes = ({ checkpoints }: CourseBook): Node[] =>
  checkpoints
    .flatMap((c): Node[] => (c.position === null ? [] : [{ distance: printedMetres(c.at), ...c.position }]))
    .sort((a, b) => a.distance - b.distance);

/** The line along which the officials measured that road. */
export function surveyRoad(road: DriveRoad, from: number, to: number): readonly SurveyedPoint[] {
  const points: SurveyedPoint[] = [];
  for (let d = from; d < to + STEP; d += STEP) {
    const { lat, lon } = road.at(d);
    points.push({ lat, lon, d });
  }
  return points;
}

/** The two nodes between which a distance lies; the first two or the last two beyond the ends. */
function pairAround(nodes: readonly Node[], distance: number): readonly [Node, Node] {
  let [low, high] = [0, nodes.length - 1];
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if ((nodes[middle] as Node).distance < distance) low = middle;
    else high = middle;
  }
  return [nodes[low] as Node, nodes[high] as Node];
}

function roadThrough(nodesAround: (distance: number) => readonly [Node, Node]): DriveRoad {
  return {
    at(distance) {
      const [from, to] = nodesAround(distance);
      const share = (distance - from.distance) / (to.distance - from.distance);
      const east = (to.lon - from.lon) * metresPerDegreeOfLongitude(from.lat);
      const north = (to.lat - from.lat) * METRES_PER_DEGREE;
      const course = (Math.atan2(east, north) / RADIANS + 360) % 360;
      return { lat: from.lat + share * (to.lat - from.lat), lon: from.lon + share * (to.lon - from.lon), course };
    },
  };
}

const STEP = 25;
const FIRST = -1000;
/** In the middle of an ocean, so that nobody takes it for a place. */
const BEGIN = { lat: 45, lon: -30 };

/** A road made as the car comes to it; the bends are a few slow waves of heading. */
export function inventRoad(seed: number): DriveRoad {
  const random = createRandom(seed, 'road');
  const waves = [40_000, 9000, 2500].map((length) => ({ length, swing: random.range(0.2, 0.6), phase: random.range(0, 2 * Math.PI) }));
  const base = random.range(0, 2 * Math.PI);
  const headingAt = (d: number): number =>
    waves.reduce((sum, wave) => sum + wave.swing * Math.sin((2 * Math.PI * d) / wave.length + wave.phase), base);
  const nodes: Node[] = [{ distance: FIRST, ...BEGIN }];
  return roadThrough((distance) => {
    const to = Math.max(1, Math.ceil((distance - FIRST) / STEP));
    for (let last = nodes[nodes.length - 1] as Node; nodes.length <= to; last = nodes[nodes.length - 1] as Node) {
      const heading = headingAt(last.distance);
      const lat = last.lat + (STEP * Math.cos(heading)) / METRES_PER_DEGREE;
      const lon = last.lon + (STEP * Math.sin(heading)) / metresPerDegreeOfLongitude(last.lat);
      nodes.push({ distance: last.distance + STEP, lat, lon });
    }
    return [nodes[to - 1] as Node, nodes[to] as Node];
  });
}
