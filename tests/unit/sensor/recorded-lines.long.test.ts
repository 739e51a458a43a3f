import { readFileSync } from 'node:fs';
import geographiclib from 'geographiclib-geodesic';
import { parseNmeaSentence } from 'nmea-simple';
import { describe, expect, it, vi } from 'vitest';
import { judgeSentence } from '#shared/sensor/checksum.ts';
import { decodeNmea } from '#shared/sensor/nmea-sentence.ts';
import { createSentenceReader } from '#shared/sensor/sentence-reader.ts';
import { hasRecorded, recorded, recordedNote } from '#tests/e2e/support/recorded-data.ts';
import { bytesOf, type OfType, ofType } from '#tests/unit/sensor/reading.ts';

/** Many lines on a busy machine. */
vi.setConfig({ testTimeout: 30_000 });

type Fix = OfType<'fix.v1'>;
const { WGS84 } = geographiclib.Geodesic;
const KNOT = 1852 / 3600;

/** The log's lines without the comments its collectors put in. */
const linesOf = (path: string): string[] =>
  readFileSync(recorded(path), 'latin1')
    .split(/\r?\n/)
    .filter((line) => line !== '' && !line.startsWith('#'));

function readLog(path: string, dateFloorMs: number | null = null, only = /./) {
  const reader = createSentenceReader({ dateFloorMs });
  const lines = linesOf(path).filter((line) => only.test(line));
  // Real spacing is lost in most logs; a hundredth of a second a line keeps an epoch's burst together.
  const observations = lines.flatMap((line, i) => reader.push(bytesOf(`${line}\r\n`), i * 10_000));
  observations.push(...reader.push(new Uint8Array(), 1e12));
  return { fixes: ofType(observations, 'fix.v1'), observations, reader };
}

const placed = (fixes: readonly Fix[]): (Fix & { lat: number; lon: number })[] =>
  fixes.filter((f): f is Fix & { lat: number; lon: number } => f.lat !== null && f.lon !== null);

function geodesicLength(fixes: readonly Fix[]): number {
  const track = placed(fixes);
  return track.slice(1).reduce((sum, to, i) => {
    const from = track[i];
    return from === undefined ? sum : sum + (WGS84.Inverse(from.lat, from.lon, to.lat, to.lon).s12 ?? 0);
  }, 0);
}

/** Trapezoid of the reported speed over the receiver's own time. */
function speedLength(fixes: readonly Fix[]): number {
  const track = fixes.filter((f) => f.speed !== null && f.utcMs !== null);
  return track.slice(1).reduce((sum, to, i) => {
    const from = track[i];
    return sum + (((from?.speed ?? 0) + (to.speed ?? 0)) / 2) * (((to.utcMs ?? 0) - (from?.utcMs ?? 0)) / 1000);
  }, 0);
}

const gaps = (fixes: readonly Fix[]): number[] =>
  fixes.slice(1).map((f, i) => ((f.utcMs ?? Number.NaN) - (fixes[i]?.utcMs ?? Number.NaN)) / 1000);

const RECEIVERS = [
  'receivers/bt451.log',
  'receivers/bundg_zeus_9.log',
  'receivers/firefly-II.log',
  'receivers/gp-320fw-2019-03-28.log',
  'receivers/gp-320fw-2019-04-06-overflow.log',
  'receivers/gp-320fw-2019-04-07-coldboot.log',
  'receivers/isync.log',
  'receivers/nmea-rtk.log',
  'receivers/telit-he910.log',
  'receivers/venus634lp.log',
  'car/MTV.Local1.ublox-F9K.20200206-181434.nmea',
  'car/MTV.Local1.SPAN.20200206-181434.gga',
  'car/qt-drive.nmea',
].map((path) => `nmea/${path}`);

describe.skipIf(!hasRecorded)(`recorded receivers${recordedNote}`, () => {
  it.each(RECEIVERS)('%s: every line is counted once, and fields agree with nmea-simple', (path) => {
    const { reader } = readLog(path);
    const pieces = linesOf(path)
      .flatMap((line) => line.split(/(?=\$)/))
      .filter((piece) => piece.trim() !== '');
    expect(reader.goodLines + reader.garbledLines).toBe(pieces.length);
    const good = pieces.filter((piece) => judgeSentence(piece) === 'ok');
    expect(reader.goodLines).toBe(good.length);
    expect(good.flatMap(disagreements)).toEqual([]);
  });

  // Counts of bad checksums as published beside the recordings.
  it.each([
    ['nmea/receivers/firefly-II.log', 46, 23],
    ['nmea/car/MTV.Local1.ublox-F9K.20200206-181434.nmea', 45_485, 13],
    ['nmea/car/MTV.Local1.SPAN.20200206-181434.gga', 1748, 1748],
    ['nmea/car/qt-drive.nmea', 1403, 0],
  ])('%s: %d good, %d garbled', (path, good, garbled) => {
    const { reader } = readLog(path);
    expect([reader.goodLines, reader.garbledLines]).toEqual([good, garbled]);
  });

  it('keeps the sentence that broke into another (isync)', () => {
    const { reader, fixes } = readLog('nmea/receivers/isync.log');
    expect([reader.goodLines, reader.garbledLines]).toEqual([134, 2]);
    expect(fixes).toHaveLength(12);
    expect(fixes.every((f) => f.speed !== null && f.lat !== null)).toBe(true);
  });

  it('repairs a date that lost 1024 weeks and keeps a right one (gp-320fw)', () => {
    const days = (path: string): string[] => [
      ...new Set(
        readLog(path, Date.UTC(2019, 0, 1))
          .fixes.filter((f) => f.utcMs !== null)
          .map((f) => new Date(f.utcMs ?? 0).toISOString().slice(0, 10)),
      ),
    ];
    expect(days('nmea/receivers/gp-320fw-2019-03-28.log')).toEqual(['2019-03-28']);
    expect(days('nmea/receivers/gp-320fw-2019-04-06-overflow.log')).toEqual(['2019-04-06']);
    expect(days('nmea/receivers/gp-320fw-2019-04-07-coldboot.log')).toEqual(['2019-04-07']);
  });

  it('goes on when the time goes back 52 minutes (bt451)', () => {
    const { fixes } = readLog('nmea/receivers/bt451.log');
    const steps = gaps(fixes.filter((f) => f.utcMs !== null));
    expect(Math.min(...steps)).toBe(-3122.5);
    expect(placed(fixes)).toHaveLength(15);
  });

  it('has no place where the receiver has none (telit), and sees the gap of ten minutes (nmea-rtk)', () => {
    const telit = readLog('nmea/receivers/telit-he910.log').fixes;
    expect(telit).toHaveLength(224);
    expect(telit.filter((f) => f.lat === null && f.speed === null && f.utcMs === null)).toHaveLength(224 - placed(telit).length);
    expect(placed(telit)).toHaveLength(187);
    expect(Math.max(...gaps(readLog('nmea/receivers/nmea-rtk.log').fixes))).toBeCloseTo(630, -1);
  });

  // Lengths by WGS84 geodesic and by reported speed, metres, as published beside the recordings.
  it.each([
    // This plotter's GGA and RMC name the same place a second apart; the published length is that of its RMC.
    ['nmea/receivers/bundg_zeus_9.log', 428.3, 427.5, /RMC/],
    ['nmea/car/qt-drive.nmea', 1705.7, 1705.9, /./],
    ['nmea/car/MTV.Local1.ublox-F9K.20200206-181434.nmea', 8606, null, /./],
    ['nmea/car/MTV.Local1.SPAN.20200206-181434.gga', 8735.6, null, /./],
  ])('%s: %d m by position, %d m by speed', (path, byPosition, bySpeed, only) => {
    const { fixes } = readLog(path, null, only);
    expect(Math.abs(geodesicLength(fixes) / byPosition - 1)).toBeLessThan(0.001);
    if (bySpeed !== null) expect(Math.abs(speedLength(fixes) / bySpeed - 1)).toBeLessThan(0.005);
    else if (path.endsWith('.gga')) expect(fixes.every((f) => f.speed === null)).toBe(true);
  });

  it('sees the six gaps of the car drive, the longest 40 s', () => {
    const steps = gaps(readLog('nmea/car/MTV.Local1.ublox-F9K.20200206-181434.nmea').fixes).filter((s) => s > 1.5);
    expect(steps).toHaveLength(6);
    expect(Math.max(...steps)).toBeLessThanOrEqual(41);
  });
});

/** What nmea-simple reads differently. It makes 0 or NaN of an empty field, so only fields that are present are compared. */
function disagreements(line: string): string[] {
  const mine = decodeNmea(line.slice(1, -3));
  if (mine === null || mine.kind === 'zda' || mine.kind === 'gll') return [];
  const theirs = parseNmeaSentence(line);
  const pairs: [number | null, number][] = [];
  const same: boolean[] = [];
  if (theirs.sentenceId === 'VTG' && mine.kind === 'vtg')
    pairs.push([mine.speed, theirs.speedKnots * KNOT], [mine.course, theirs.trackTrue]);
  else if (theirs.sentenceId === 'GGA' && mine.kind === 'gga') {
    pairs.push([mine.lat, theirs.latitude], [mine.lon, theirs.longitude]);
    same.push(mine.valid === null || mine.valid === (theirs.fixType !== 'none'));
  } else if (theirs.sentenceId === 'RMC' && mine.kind === 'rmc') {
    pairs.push(
      [mine.lat, theirs.latitude],
      [mine.lon, theirs.longitude],
      [mine.speed, theirs.speedKnots * KNOT],
      [mine.course, theirs.trackTrue],
    );
    const utcMs = mine.dayMs === null || mine.timeOfDayMs === null ? null : mine.dayMs + mine.timeOfDayMs;
    // It reads a fraction of a second only where it is printed in hundredths.
    same.push(utcMs === null || Math.floor(utcMs / 1000) === Math.floor(theirs.datetime.getTime() / 1000));
    same.push((mine.valid === true) === (theirs.status === 'valid'));
  } else same.push(false);
  const agree = same.every(Boolean) && pairs.every(([a, b]) => a === null || Math.abs(a - b) < 1e-9);
  return agree ? [] : [line];
}
