import { parseNmeaSentence } from 'nmea-simple';
import { describe, expect, it, vi } from 'vitest';
import { judgeSentence } from '#shared/sensor/checksum.ts';
import { decodeNmea } from '#shared/sensor/nmea-sentence.ts';
import { hasRecorded, recordedNote } from '#tests/e2e/support/recorded-data.ts';
import { type Fix, linesOf, placed, readLog } from '#tests/unit/sensor/recorded-log.ts';

/** Many lines on a busy machine. */
vi.setConfig({ testTimeout: 30_000 });

const KNOT = 1852 / 3600;

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
