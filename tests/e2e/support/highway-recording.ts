import { readFileSync } from 'node:fs';
import { recorded } from '#tests/e2e/support/recorded-data.ts';

/** The two recorded drives over one stretch of highway: rear wheel encoders at 100 Hz and an RTK receiver at 10 Hz. */

export const HIGHWAY_DRIVES = ['2024-07-11-12-41-42', '2024-07-11-14-34-05'] as const;
export type HighwayDrive = (typeof HIGHWAY_DRIVES)[number];

export interface EncoderRow {
  /** Seconds by the recording computer's clock, which no receiver disciplined. */
  readonly hostS: number;
  /** Signed 32-bit cumulative counts; the first runs backwards. */
  readonly c1: number;
  readonly c2: number;
}

export interface FixRow {
  readonly hostS: number;
  /** The receiver's own time, seconds after `utcZeroMs`. */
  readonly utcS: number;
  readonly lat: number;
  readonly lon: number;
  readonly quality: number;
  /** m/s, null where the recording has none. */
  readonly speed: number | null;
}

export interface HighwayRecording {
  readonly encoder: readonly EncoderRow[];
  readonly fixes: readonly FixRow[];
  readonly utcZeroMs: number;
}

/** The receiver over the measured wheel. */
const RECEIVER = 'RightRear';

const lines = (path: string): string[] => readFileSync(recorded(path), 'utf8').split(/\r?\n/).filter(Boolean);

export function readHighway(drive: HighwayDrive): HighwayRecording {
  const base = `wheel_gnss/highway/${drive}`;
  const encoder = lines(`${base}_encoder.csv`).flatMap((line): EncoderRow[] => {
    const [hostS, c1, c2] = line.split(',').map(Number);
    return hostS === undefined || Number.isNaN(hostS) || c1 === undefined || c2 === undefined ? [] : [{ hostS, c1, c2 }];
  });
  const gnss = lines(`${base}_gnss.csv`);
  const utcZeroMs = Number(/utc_t0_unix_s=(\d+)/.exec(gnss[0] ?? '')?.[1]) * 1000;
  const fixes = gnss.flatMap((line): FixRow[] => {
    const [rx, hostS, utcS, lat, lon, , quality, , , , kmh] = line.split(',');
    if (rx !== RECEIVER) return [];
    const speed = kmh === '' || kmh === undefined ? null : Number(kmh) / 3.6;
    return [{ hostS: Number(hostS), utcS: Number(utcS), lat: Number(lat), lon: Number(lon), quality: Number(quality), speed }];
  });
  return { encoder, fixes, utcZeroMs };
}
