import { describe, expect, it, vi } from 'vitest';
import { hasRecorded, recordedNote } from '#tests/e2e/support/recorded-data.ts';
import { apart, geodesicLength, placed, placesByTime, readLog, speedLength } from '#tests/unit/sensor/recorded-log.ts';

/** Many lines on a busy machine. */
vi.setConfig({ testTimeout: 30_000 });

const RECEIVER = 'nmea/car/MTV.Local1.ublox-F9K.20200206-181434.nmea';
const TRUTH = 'nmea/car/MTV.Local1.SPAN.20200206-181434.gga';
const DAY_MS = 86_400_000;

interface Row {
  readonly file: string;
  readonly lines: number;
  /** Sentences accepted, pieces dropped, fixes, of them with a place. */
  readonly counts: readonly [number, number, number, number];
  /** Metres by position and by speed; in brackets beside it what the recordings' own page says, where it says something. */
  readonly byPosition: number;
  readonly bySpeed: number | null;
  readonly published?: { readonly position: number; readonly speed: number | null };
  readonly only?: RegExp;
}

/** Lines and garbled ones that the recordings' page publishes: 23 bad (firefly), 45 498 lines and 13 bad (car), every RMC of the truth. */
const ROWS: readonly Row[] = [
  // the place jumps by two kilometres with the clock: a receiver found itself
  { file: 'nmea/receivers/bt451.log', lines: 144, counts: [144, 0, 19, 15], byPosition: 1975.5, bySpeed: 32.9 },
  {
    // this plotter's GGA and RMC name the same place a second apart; the published length is that of its RMC, of which it repeats one
    file: 'nmea/receivers/bundg_zeus_9.log',
    lines: 146,
    counts: [146, 0, 145, 145],
    byPosition: 428.3,
    bySpeed: 427.5,
    published: { position: 428.3, speed: 427.5 },
    only: /RMC/,
  },
  { file: 'nmea/receivers/firefly-II.log', lines: 69, counts: [46, 23, 23, 23], byPosition: 2.4, bySpeed: 0 },
  { file: 'nmea/receivers/gp-320fw-2019-03-28.log', lines: 137, counts: [137, 0, 21, 21], byPosition: 0.7, bySpeed: 0 },
  { file: 'nmea/receivers/gp-320fw-2019-04-06-overflow.log', lines: 141, counts: [141, 0, 21, 21], byPosition: 1, bySpeed: 0.4 },
  { file: 'nmea/receivers/gp-320fw-2019-04-07-coldboot.log', lines: 134, counts: [93, 46, 20, 2], byPosition: 0, bySpeed: 0.1 },
  { file: 'nmea/receivers/isync.log', lines: 135, counts: [134, 2, 12, 12], byPosition: 0.5, bySpeed: 0.3 },
  // at rest; a trapezoid over its silence of 630 s is no distance
  { file: 'nmea/receivers/nmea-rtk.log', lines: 244, counts: [244, 0, 122, 122], byPosition: 16.2, bySpeed: null },
  { file: 'nmea/receivers/telit-he910.log', lines: 1558, counts: [1558, 0, 224, 187], byPosition: 9.3, bySpeed: 2.4 },
  { file: 'nmea/receivers/venus634lp.log', lines: 51, counts: [48, 3, 7, 7], byPosition: 11, bySpeed: 1.7 },
  // by speed it is too long where its trapezoid goes over gaps of up to 40 s: 8735.6 m is the truth
  {
    file: RECEIVER,
    lines: 45_498,
    counts: [45_485, 13, 1654, 1654],
    byPosition: 8606.3,
    bySpeed: 8821.1,
    published: { position: 8606, speed: null },
  },
  {
    file: TRUTH,
    lines: 3496,
    counts: [1748, 1748, 1748, 1748],
    byPosition: 8735.7,
    bySpeed: null,
    published: { position: 8735.6, speed: null },
  },
  {
    file: 'nmea/car/qt-drive.nmea',
    lines: 1403,
    counts: [1403, 0, 156, 156],
    byPosition: 1705.7,
    bySpeed: 1705,
    published: { position: 1705.7, speed: 1705.9 },
  },
];

describe.skipIf(!hasRecorded)(`files of recorded receivers${recordedNote}`, () => {
  it.each(ROWS)('$file', ({ file, lines, counts, byPosition, bySpeed, published, only }) => {
    const log = readLog(file, Date.UTC(2019, 0, 1), only);
    const track = placed(log.fixes);
    const [position, speed] = [geodesicLength(track), speedLength(log.fixes)];
    console.info(
      `${file}: ${log.lines} lines, ${log.reader.goodLines} good, ${log.reader.garbledLines} garbled, ${log.fixes.length} fixes, ${track.length} placed, ${position.toFixed(1)} m by position, ${speed.toFixed(1)} m by speed`,
    );
    expect(log.lines).toBe(lines);
    expect([log.reader.goodLines, log.reader.garbledLines, log.fixes.length, track.length]).toEqual(counts);
    expect(Math.abs(position - byPosition)).toBeLessThan(0.06);
    if (bySpeed !== null) expect(Math.abs(speed - bySpeed)).toBeLessThan(0.5);
    if (published === undefined) return;
    expect(Math.abs(position - published.position)).toBeLessThan(0.5);
    if (published.speed !== null) expect(Math.abs(speed - published.speed)).toBeLessThan(1);
  });

  it('between gaps speed and position of the car receiver agree within 0.1 %; over the gaps each errs in its own way', () => {
    const { fixes } = readLog(RECEIVER);
    const sums = { position: 0, speed: 0, gapTruth: 0, gapLine: 0, gapSpeed: 0 };
    const truth = [...placesByTime(TRUTH)].sort(([a], [b]) => a - b);
    const between = (from: number, to: number): number =>
      geodesicLength(truth.filter(([ms]) => ms >= from % DAY_MS && ms <= to % DAY_MS).map(([, place]) => place));
    for (const [i, to] of placed(fixes).entries()) {
      const from = placed(fixes.slice(i - 1, i))[0];
      if (i === 0 || from === undefined || from.utcMs === null || to.utcMs === null) continue;
      const [line, bySpeed] = [apart(from, to), speedLength([from, to])];
      if (to.utcMs - from.utcMs > 1500) {
        sums.gapTruth += between(from.utcMs, to.utcMs);
        sums.gapLine += line;
        sums.gapSpeed += bySpeed;
      } else {
        sums.position += line;
        sums.speed += bySpeed;
      }
    }
    console.info(`six gaps: truth ${sums.gapTruth.toFixed(1)} m, straight ${sums.gapLine.toFixed(1)}, speed ${sums.gapSpeed.toFixed(1)}`);
    expect(Math.abs(sums.speed / sums.position - 1)).toBeLessThan(0.001);
    // published: straight lines over the gaps lose 129 m
    expect(Math.abs(sums.gapTruth - sums.gapLine - 129)).toBeLessThan(2);
    expect(Math.abs(sums.gapTruth - sums.gapSpeed)).toBeLessThan(sums.gapTruth - sums.gapLine);
  });

  it('the stated accuracy holds nine places of ten against the survey-grade path, whatever the quality', () => {
    const truth = placesByTime(TRUTH);
    const by = new Map<number, { within: number; all: number }>();
    for (const fix of placed(readLog(RECEIVER).fixes)) {
      const there = truth.get((fix.utcMs ?? 0) % DAY_MS);
      if (there === undefined || fix.accuracy === null) continue;
      // HDOP lay between 0.6 and 1.2: thirds of a metre tell the qualities apart
      const kind = fix.accuracy < 0.8 ? 4 : fix.accuracy < 1.4 ? 5 : 2;
      const tally = by.get(kind) ?? { within: 0, all: 0 };
      by.set(kind, { within: tally.within + (apart(fix, there) <= fix.accuracy ? 1 : 0), all: tally.all + 1 });
    }
    console.info([...by].map(([kind, { within, all }]) => `kind ${kind}: ${within} of ${all}`).join('; '));
    for (const { within, all } of by.values()) expect(within / all).toBeGreaterThan(0.9);
    expect([...by.values()].reduce((sum, { all }) => sum + all, 0)).toBeGreaterThan(1600);
  });
});
