import type { FixV1 } from '#shared/journal/observation.ts';
import { type CourseLine, project, RADIUS_95 } from '#shared/pace/course-line.ts';
import { type Gnss, isPlaced, metresAtArrival } from '#shared/pace/gnss.ts';

/** The last few positions as official distances of the nose, about one a second, for the nodes that need one. */
export interface ProjectedFixes {
  /** By the instant at which the fix came; one sigma in metres, without what its lateness adds. */
  recent: { at: number; d: number; sigma: number }[];
  /** Fixes in a row that lay nowhere on the line. */
  missed: number;
}

export const makeProjectedFixes = (): ProjectedFixes => ({ recent: [], missed: 0 });

/** What a position needs to become a distance. */
export interface Surveyed {
  readonly line: CourseLine;
  /** The aerial sits this far behind the nose, m. */
  readonly aerialM: number;
  /** Official distance as it is estimated now, m. */
  readonly expected: number;
}

const EVERY_US = 900_000;
const KEPT_US = 8_000_000;
/** Looked for within this of the expected distance, and further the longer nothing was found, m. */
const WINDOW_M = 400;
const WIDER_M = 50;
const WIDEST_M = 20_000;
/** One sigma where the receiver promises nothing, and the least ever believed, m. */
const SIGMA_UNTOLD = 5;
const SIGMA_LEAST = 1.5;

/** Takes the fix just taken by `gnss`, if it is time for another. */
export function projectFix(projected: ProjectedFixes, fix: FixV1, gnss: Gnss, { line, aerialM, expected }: Surveyed): void {
  const { recent } = projected;
  const at = gnss.last?.at ?? fix.at;
  const before = recent[recent.length - 1];
  if (!isPlaced(fix) || (before !== undefined && at - before.at < EVERY_US)) return;
  const told = typeof fix.accuracy === 'number' && fix.accuracy > 0 ? fix.accuracy / RADIUS_95 : SIGMA_UNTOLD;
  const placed = { lat: fix.lat as number, lon: fix.lon as number, course: fix.course ?? null, speed: fix.speed, sigma: told };
  const found = project(line, placed, expected, Math.min(WINDOW_M + WIDER_M * projected.missed, WIDEST_M));
  projected.missed = found === null ? projected.missed + 1 : 0;
  if (found === null) return;
  recent.push({ at, d: found.d + aerialM, sigma: Math.max(told, SIGMA_LEAST) });
  while (recent.length > 1 && (recent[0] as { at: number }).at < at - KEPT_US) recent.shift();
}

const NEAR_US = 3_000_000;
/** The position nearest to an instant of arrival, carried there by GNSS's own metres; null where none is near. */
export function positionAt({ recent }: ProjectedFixes, gnss: Gnss, arrival: number, lateM: number): { d: number; sigma: number } | null {
  let nearest: ProjectedFixes['recent'][number] | null = null;
  for (const p of recent) if (nearest === null || Math.abs(p.at - arrival) < Math.abs(nearest.at - arrival)) nearest = p;
  if (nearest === null || Math.abs(nearest.at - arrival) > NEAR_US) return null;
  const [there, here] = [metresAtArrival(gnss, nearest.at), metresAtArrival(gnss, arrival)];
  if (there === null || here === null) return null;
  return { d: nearest.d + here - there, sigma: Math.hypot(nearest.sigma, lateM) };
}
