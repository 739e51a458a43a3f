import { printedMetres } from '#shared/course/convert.ts';
import type { Pack } from '#shared/course/pack.ts';
import { createRandom } from './random.ts';

/** Where the road runs. WGS84 degrees; course in degrees true, 0..360. */
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

/** Straight from checkpoint to checkpoint where at least two have positions, else an invented road on open water. */
export function makeDriveRoad(pack: Pack, seed: number): DriveRoad {
  const nodes = pack.courseBook.checkpoints
    .flatMap((c): Node[] => (c.position === null ? [] : [{ distance: printedMetres(c.at), ...c.position }]))
    .sort((a, b) => a.distance - b.distance);
  return nodes.length >= 2 ? roadThrough(() => nodes) : roadThrough(inventedNodes(seed));
}

function roadThrough(nodesTo: (distance: number) => readonly Node[]): DriveRoad {
  return {
    at(distance) {
      const nodes = nodesTo(distance);
      const after = nodes.findIndex((node, i) => i > 0 && node.distance >= distance);
      const to = nodes[after > 0 ? after : nodes.length - 1] as Node;
      const from = nodes[(after > 0 ? after : nodes.length - 1) - 1] as Node;
      const share = (distance - from.distance) / (to.distance - from.distance);
      const east = (to.lon - from.lon) * metresPerDegreeOfLongitude(from.lat);
      const north = (to.lat - from.lat) * METRES_PER_DEGREE;
      const course = (Math.atan2(east, north) / RADIANS + 360) % 360;
      return { lat: from.lat + share * (to.lat - from.lat), lon: from.lon + share * (to.lon - from.lon), course };
    },
  };
}

const STEP = 25;
const KEPT = 4;
/** In the middle of an ocean, so that nobody takes it for a place. */
const BEGIN = { lat: 45, lon: -30 };

/** Nodes around a distance, made as the car comes to them; the bends are a few slow waves of heading. */
function inventedNodes(seed: number): (distance: number) => readonly Node[] {
  const random = createRandom(seed, 'road');
  const waves = [40_000, 9000, 2500].map((length) => ({ length, swing: random.range(0.2, 0.6), phase: random.range(0, 2 * Math.PI) }));
  const base = random.range(0, 2 * Math.PI);
  const headingAt = (d: number): number =>
    waves.reduce((sum, wave) => sum + wave.swing * Math.sin((2 * Math.PI * d) / wave.length + wave.phase), base);
  let nodes: Node[] = [{ distance: -1000, ...BEGIN }];
  return (distance) => {
    for (let last = nodes.at(-1) as Node; nodes.length < 2 || last.distance < distance; last = nodes.at(-1) as Node) {
      const heading = headingAt(last.distance);
      const lat = last.lat + (STEP * Math.cos(heading)) / METRES_PER_DEGREE;
      nodes = [
        ...nodes.slice(-KEPT),
        { distance: last.distance + STEP, lat, lon: last.lon + (STEP * Math.sin(heading)) / metresPerDegreeOfLongitude(last.lat) },
      ];
    }
    return nodes;
  };
}
