import { readFileSync } from 'node:fs';
import { recorded } from '#tests/e2e/support/recorded-data.ts';
import { placed, placesByTime, readLog } from '#tests/unit/sensor/recorded-log.ts';
import { fromPlaceAt, geodesicPath, type Path } from './path.ts';
import { type Arrived, fix, geometryOf, type RecordedDrive } from './recorded-drive.ts';

/** Drives without a wheel. Arrivals are lost in these logs: a fix stands at the receiver's own time, with no delay. */

interface Fixed {
  readonly name: string;
  readonly truthBy: string;
  readonly path: Path;
  readonly arrived: readonly Arrived[];
  readonly releaseT: number;
  readonly lengthM: number;
  readonly gnss: RecordedDrive['gnss'];
  readonly geometry?: boolean;
}

function drive({ name, truthBy, path, arrived, releaseT, lengthM, gnss, geometry = false }: Fixed): RecordedDrive {
  const truth = fromPlaceAt(path, releaseT);
  return {
    name,
    truthBy,
    truth,
    releaseT,
    stagedBehindM: 0,
    lengthM,
    arrived,
    wheels: [],
    gnss,
    geometry: geometry ? geometryOf(truth) : null,
  };
}

export function motorwayDrive(): RecordedDrive {
  const rows = readFileSync(recorded('gnss/I99_StateCollege73_to_Altoona33_20210123.csv'), 'utf8')
    .split(/\r?\n/)
    .filter((line) => /^\d/.test(line))
    .map((line) => line.split(',').map(Number) as [number, number, number, number, number]);
  const zero = (rows[0]?.[0] ?? 0) - 1;
  const moving = rows.find((r) => r[4] > 1)?.[0] ?? 0;
  return drive({
    name: 'motorway',
    truthBy: 'its own positions; distance from its speeds',
    path: geodesicPath(rows.map(([t, lat, lon]) => ({ t: t - zero, lat, lon }))),
    arrived: rows.map(([t, , , , speed]) => fix(t - zero, { speed })),
    releaseT: moving - zero - 3,
    lengthM: 69_000,
    gnss: { speed: true, position: false },
  });
}

const CAR = 'nmea/car/MTV.Local1.ublox-F9K.20200206-181434.nmea';
const CAR_TRUTH = 'nmea/car/MTV.Local1.SPAN.20200206-181434.gga';
const DAY_MS = 86_400_000;

/** One drive of 29 minutes in town by an ordinary car receiver, the truth by survey-grade equipment in the same car. */
export function townDrive(): RecordedDrive {
  const fixes = placed(readLog(CAR).fixes).filter((f) => f.utcMs !== null);
  const zeroMs = ((fixes[0]?.utcMs ?? 0) % DAY_MS) - 1000;
  const seconds = (utcMs: number): number => ((utcMs % DAY_MS) - zeroMs) / 1000;
  const path = geodesicPath([...placesByTime(CAR_TRUTH)].map(([ms, { lat, lon }]) => ({ t: seconds(ms), lat, lon })));
  const moving = fixes.find((f) => (f.speed ?? 0) > 1.5)?.utcMs ?? 0;
  return drive({
    name: 'town',
    truthBy: 'survey-grade positions of other equipment',
    path,
    arrived: fixes.map((f) => fix(seconds(f.utcMs ?? 0), f)),
    releaseT: seconds(moving) - 3,
    lengthM: 8500,
    gnss: { speed: true, position: true },
    geometry: true,
  });
}

export function plainDrive(): RecordedDrive {
  const fixes = placed(readLog('nmea/car/qt-drive.nmea').fixes).filter((f) => f.utcMs !== null);
  const zero = (fixes[0]?.utcMs ?? 0) / 1000 - 1;
  const seconds = (utcMs: number | null): number => (utcMs ?? 0) / 1000 - zero;
  return drive({
    name: 'plain NMEA',
    truthBy: 'its own positions; distance from its speeds',
    path: geodesicPath(fixes.map((f) => ({ t: seconds(f.utcMs), lat: f.lat, lon: f.lon }))),
    arrived: fixes.map((f) => fix(seconds(f.utcMs), f)),
    releaseT: 3,
    lengthM: 1600,
    gnss: { speed: true, position: true },
  });
}

export function gpxDrive(): RecordedDrive {
  const text = readFileSync(recorded('gpx/around-visnjan-with-car.gpx'), 'utf8');
  const points = [...text.matchAll(/<trkpt lat="([^"]+)" lon="([^"]+)">.*?<time>([^<]+)<\/time>/gs)].map((m) => ({
    lat: Number(m[1]),
    lon: Number(m[2]),
    at: Date.parse(m[3] ?? '') / 1000,
  }));
  const zero = (points[0]?.at ?? 0) - 1;
  const track = points.map(({ lat, lon, at }) => ({ t: at - zero, lat, lon }));
  return drive({
    name: 'GPX',
    truthBy: 'its own positions: tells how the engine joins them',
    path: geodesicPath(track),
    arrived: track.map(({ t, lat, lon }) => fix(t, { lat, lon })),
    releaseT: 3,
    lengthM: 2600,
    gnss: { speed: false, position: true },
  });
}
