import { readFileSync } from 'node:fs';
import geographiclib from 'geographiclib-geodesic';
import { judgeSentence } from '#shared/sensor/checksum.ts';
import { decodeNmea } from '#shared/sensor/nmea-sentence.ts';
import { createSentenceReader } from '#shared/sensor/sentence-reader.ts';
import { recorded } from '#tests/e2e/support/recorded-data.ts';
import { bytesOf, type OfType, ofType } from '#tests/unit/sensor/reading.ts';

export type Fix = OfType<'fix.v1'>;
export type PlacedFix = Fix & { readonly lat: number; readonly lon: number };
const { WGS84 } = geographiclib.Geodesic;

/** The log's lines without the comments its collectors put in. */
export const linesOf = (path: string): string[] =>
  readFileSync(recorded(path), 'latin1')
    .split(/\r?\n/)
    .filter((line) => line !== '' && !line.startsWith('#'));

export function readLog(path: string, dateFloorMs: number | null = null, only = /./) {
  const reader = createSentenceReader({ dateFloorMs });
  const lines = linesOf(path).filter((line) => only.test(line));
  // Real spacing is lost in most logs; a hundredth of a second a line keeps an epoch's burst together.
  const observations = lines.flatMap((line, i) => reader.push(bytesOf(`${line}\r\n`), i * 10_000));
  observations.push(...reader.push(new Uint8Array(), 1e12));
  return { fixes: ofType(observations, 'fix.v1'), observations, reader, lines: lines.length };
}

export const placed = (fixes: readonly Fix[]): PlacedFix[] => fixes.filter((f): f is PlacedFix => f.lat !== null && f.lon !== null);

interface Place {
  readonly lat: number;
  readonly lon: number;
}

/** WGS84 geodesic, metres, by GeographicLib. */
export const apart = (a: Place, b: Place): number => WGS84.Inverse(a.lat, a.lon, b.lat, b.lon).s12 ?? Number.NaN;

/** Sum of the lines between positions, metres. */
export function geodesicLength(track: readonly Place[]): number {
  return track.slice(1).reduce((sum, to, i) => sum + apart(track[i] as Place, to), 0);
}

/** Trapezoid of the reported speed over the receiver's own time, metres; a step back in time adds nothing. */
export function speedLength(fixes: readonly Fix[]): number {
  const track = fixes.filter((f) => f.speed !== null && f.utcMs !== null);
  return track.slice(1).reduce((sum, to, i) => {
    const from = track[i] as Fix;
    const seconds = Math.max(0, (to.utcMs ?? 0) - (from.utcMs ?? 0)) / 1000;
    return sum + (((from.speed ?? 0) + (to.speed ?? 0)) / 2) * seconds;
  }, 0);
}

/** Positions of a log's GGA by time of day, for files whose dates cannot be trusted. */
export function placesByTime(path: string): Map<number, Place> {
  const places = new Map<number, Place>();
  for (const line of linesOf(path)) {
    const read = judgeSentence(line) === 'ok' ? decodeNmea(line.slice(1, -3)) : null;
    if (read?.kind === 'gga' && read.timeOfDayMs !== null && read.lat !== null && read.lon !== null)
      places.set(read.timeOfDayMs, { lat: read.lat, lon: read.lon });
  }
  return places;
}
