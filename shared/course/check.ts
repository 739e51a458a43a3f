import { readPrintedMetres, readPrintedSpeed } from '#shared/course/convert.ts';
import {
  type Checkpoint,
  type CourseBook,
  DUTIES,
  type PrintedDistance,
  type PrintedSpeed,
  type Zone,
} from '#shared/course/course-book.ts';
import type { RaceClass, Section } from '#shared/course/race-class.ts';

/** Every fault of a course book or a class, each with its place and a sentence. None is a reason to lose what was typed. */

export type CourseFaultCode =
  | 'BAD_DISTANCE'
  | 'BAD_SPEED'
  | 'BAD_TIME'
  | 'MISSING_TEXT'
  | 'BAD_DUTY'
  | 'BAD_POSITION'
  | 'DUPLICATE_ID'
  | 'OUT_OF_ORDER'
  | 'NO_START'
  | 'NO_FINISH'
  | 'SEVERAL_FINISHES'
  | 'AFTER_FINISH'
  | 'STOP_BOARD_BEFORE_FINISH'
  | 'ZONE_REVERSED'
  | 'ZONE_OUTSIDE'
  | 'SECTIONS_END'
  | 'FLOOR_ABOVE_CAP'
  | 'AVERAGE_OUT_OF_BOUNDS'
  | 'TARGET_DIFFERS';

export interface CourseFault {
  readonly code: CourseFaultCode;
  /** Path to the thing, for example `checkpoints[3].at`. */
  readonly where: string;
  /** Tells the person what to do. */
  readonly message: string;
  /** A caution may stand; an error must be mended before the course can be driven. */
  readonly severity: 'error' | 'caution';
}

type Report = (code: CourseFaultCode, where: string, message: string, severity?: CourseFault['severity']) => void;

function collector(): { readonly faults: CourseFault[]; readonly report: Report } {
  const faults: CourseFault[] = [];
  return { faults, report: (code, where, message, severity = 'error') => void faults.push({ code, where, message, severity }) };
}

function distance(report: Report, d: PrintedDistance, where: string): number | null {
  const value = readPrintedMetres(d);
  if (value === null)
    report('BAD_DISTANCE', where, `"${d.text}" is no distance. Write plain decimals with a point, like 12.345, and the unit km or mi.`);
  return value;
}

function speed(report: Report, s: PrintedSpeed, where: string): number | null {
  const value = readPrintedSpeed(s);
  if (value !== null && value > 0) return value;
  report('BAD_SPEED', where, `"${s.text}" is no speed. Write plain decimals above zero, like 60, and the unit km/h or mph.`);
  return null;
}

/** Faults of the official book. Empty = it can be driven. */
export function checkCourseBook(book: CourseBook): readonly CourseFault[] {
  const { faults, report } = collector();
  if (book.name.trim() === '') report('MISSING_TEXT', 'name', 'The course needs a name.');
  const places = book.checkpoints.map((c, i) => checkCheckpoint(report, c, `checkpoints[${i}]`));
  checkIds(report, book.checkpoints, 'checkpoints');
  checkOrder(report, book, places);
  checkEnds(report, book, places);
  const finishIndex = book.checkpoints.findIndex((c) => c.duty === 'finish');
  const length = finishIndex < 0 ? null : (places[finishIndex] ?? null);
  checkIds(report, book.zones, 'zones');
  for (const [i, zone] of book.zones.entries()) checkZone(report, zone, `zones[${i}]`, length);
  if (book.slowDownLimit !== null) speed(report, book.slowDownLimit, 'slowDownLimit');
  return faults;
}

function checkCheckpoint(report: Report, c: Checkpoint, where: string): number | null {
  if (c.id.trim() === '') report('MISSING_TEXT', `${where}.id`, 'A checkpoint needs an id.');
  if (c.name.trim() === '') report('MISSING_TEXT', `${where}.name`, 'A checkpoint needs a name.');
  if (!DUTIES.includes(c.duty)) report('BAD_DUTY', `${where}.duty`, `"${c.duty}" is no duty. Choose one of: ${DUTIES.join(', ')}.`);
  if (c.position !== null && !(Math.abs(c.position.lat) <= 90 && Math.abs(c.position.lon) <= 180)) {
    report('BAD_POSITION', `${where}.position`, 'Latitude lies within ±90 and longitude within ±180 degrees.');
  }
  return distance(report, c.at, `${where}.at`);
}

function checkIds(report: Report, rows: readonly { readonly id: string }[], where: string): void {
  const first = new Map<string, number>();
  rows.forEach((row, i) => {
    const before = first.get(row.id);
    if (before === undefined) first.set(row.id, i);
    else report('DUPLICATE_ID', `${where}[${i}].id`, `"${row.id}" is used by row ${before + 1} already. Give every row an id of its own.`);
  });
}

function checkOrder(report: Report, book: CourseBook, places: readonly (number | null)[]): void {
  for (let i = 1; i < places.length; i++) {
    const here = places[i];
    const before = places[i - 1];
    if (here === null || before === null || here === undefined || before === undefined || here > before) continue;
    const [a, b] = [book.checkpoints[i - 1], book.checkpoints[i]];
    report(
      'OUT_OF_ORDER',
      `checkpoints[${i}].at`,
      `"${b?.name}" at ${b?.at.text} ${b?.at.unit} does not lie after "${a?.name}" at ${a?.at.text} ${a?.at.unit}. Put the checkpoints in order of distance.`,
    );
  }
}

function checkEnds(report: Report, book: CourseBook, places: readonly (number | null)[]): void {
  const rows = book.checkpoints;
  if (rows[0]?.duty !== 'start' || (places[0] !== null && places[0] !== 0)) {
    report('NO_START', 'checkpoints[0]', 'The first checkpoint must be the start, at distance 0.');
  }
  rows.forEach((row, i) => {
    if (i > 0 && row.duty === 'start')
      report('NO_START', `checkpoints[${i}].duty`, `"${row.name}" is a second start. Only the first checkpoint is the start.`);
  });
  const finish = rows.findIndex((row) => row.duty === 'finish');
  if (finish < 0) {
    report('NO_FINISH', 'checkpoints', 'One checkpoint must have the duty finish.');
    return;
  }
  rows.forEach((row, i) => {
    const where = `checkpoints[${i}].duty`;
    if (i > finish && row.duty === 'finish')
      report('SEVERAL_FINISHES', where, `"${row.name}" is a second finish. Only one checkpoint is the finish.`);
    else if (i > finish && row.duty !== 'stop board')
      report('AFTER_FINISH', where, `"${row.name}" lies after the finish. Only the stop board may.`);
    if (i < finish && row.duty === 'stop board')
      report('STOP_BOARD_BEFORE_FINISH', where, `"${row.name}" is a stop board before the finish. It belongs after it.`);
  });
}

function checkZone(report: Report, zone: Zone, where: string, length: number | null): void {
  if (zone.id.trim() === '') report('MISSING_TEXT', `${where}.id`, 'A zone needs an id.');
  const from = distance(report, zone.from, `${where}.from`);
  const to = distance(report, zone.to, `${where}.to`);
  speed(report, zone.limit, `${where}.limit`);
  if (from === null || to === null) return;
  if (from >= to) report('ZONE_REVERSED', where, `The zone "${zone.name}" ends before it begins. Its end must lie after its beginning.`);
  if (length !== null && to > length)
    report('ZONE_OUTSIDE', `${where}.to`, `The zone "${zone.name}" ends after the finish. It must lie between start and finish.`);
}

/** Faults of a class on a book whose own check is clean. A target time that the sections do not add up to is a caution: the official target decides. */
export function checkRaceClass(book: CourseBook, raceClass: RaceClass): readonly CourseFault[] {
  const { faults, report } = collector();
  if (!Number.isInteger(raceClass.targetTimeMs) || raceClass.targetTimeMs <= 0) {
    report('BAD_TIME', 'targetTimeMs', 'The target time must be a whole number of milliseconds above zero.');
  }
  const cap = raceClass.cap === null ? null : speed(report, raceClass.cap, 'cap');
  const floor = raceClass.floor === null ? null : speed(report, raceClass.floor, 'floor');
  if (cap !== null && floor !== null && floor >= cap) report('FLOOR_ABOVE_CAP', 'floor', 'The lowest speed must lie below the highest.');
  const finish = book.checkpoints.find((c) => c.duty === 'finish');
  const length = finish === undefined ? null : readPrintedMetres(finish.at);
  const sum = checkSections(report, raceClass.sections, length, { cap, floor });
  const difference = sum === null ? 0 : raceClass.targetTimeMs / 1000 - sum;
  if (Math.abs(difference) > 0.0005) {
    const word = difference > 0 ? 'more' : 'less';
    const message = `The official target time is ${Math.abs(difference).toFixed(3)} s ${word} than the sections add up to. The official target time decides; check both.`;
    report('TARGET_DIFFERS', 'targetTimeMs', message, 'caution');
  }
  return faults;
}

/** Seconds that the sections add up to, or null where one of them is faulty. */
function checkSections(
  report: Report,
  sections: readonly Section[],
  length: number | null,
  bounds: { cap: number | null; floor: number | null },
): number | null {
  let begin = 0;
  let sum: number | null = 0;
  sections.forEach((section, i) => {
    const where = `sections[${i}]`;
    const end = distance(report, section.to, `${where}.to`);
    if (end !== null && end <= begin) report('OUT_OF_ORDER', `${where}.to`, 'Each section must end after the one before it.');
    const time = end === null ? null : sectionTime(report, section, where, end - begin, bounds);
    sum = sum === null || time === null ? null : sum + time;
    begin = end ?? begin;
  });
  if (sections.length === 0 || (length !== null && begin !== length)) {
    report('SECTIONS_END', 'sections', 'The last section must end at the finish.');
    return null;
  }
  return sum;
}

function sectionTime(
  report: Report,
  section: Section,
  where: string,
  length: number,
  { cap, floor }: { cap: number | null; floor: number | null },
): number | null {
  if (section.kind === 'neutral') {
    if (Number.isInteger(section.timeMs) && section.timeMs > 0) return section.timeMs / 1000;
    report('BAD_TIME', `${where}.timeMs`, 'A neutral section needs its time in whole milliseconds above zero.');
    return null;
  }
  const average = speed(report, section.average, `${where}.average`);
  if (average === null) return null;
  if (cap !== null && average > cap)
    report('AVERAGE_OUT_OF_BOUNDS', `${where}.average`, 'The average lies above the highest speed of the class.');
  if (floor !== null && average < floor)
    report('AVERAGE_OUT_OF_BOUNDS', `${where}.average`, 'The average lies below the lowest speed of the class.');
  return length / average;
}
