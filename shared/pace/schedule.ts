import { readPrintedMetres, readPrintedSpeed } from '#shared/course/convert.ts';
import type { CourseBook } from '#shared/course/course-book.ts';
import type { RaceClass } from '#shared/course/race-class.ts';
import { type Metres, type MetresPerSecond, metres, metresPerSecond, type Seconds, seconds } from '#shared/units.ts';

/**
 * The target time `T*(x)` along the official distance: T*(start) = 0 and T*(finish) = the official target time, always.
 *
 * Each average section takes its length over its average, each neutral section its own time. Where they do not add up to
 * the official target time, that time decides: the average sections are stretched by one common factor, neutral sections keep
 * their time (unless there is nothing else to stretch; then all are). `difference` says by how much the sections were off.
 */
export interface Schedule {
  readonly start: Metres;
  readonly finish: Metres;
  readonly targetTime: Seconds;
  /** Official target less what the sections add up to, seconds. */
  readonly difference: Seconds;
  readonly sections: readonly ScheduleSection[];
}

export interface ScheduleSection {
  readonly from: Metres;
  readonly to: Metres;
  /** Target time at its beginning. */
  readonly begins: Seconds;
  /** Target speed that the schedule really asks for here, after stretching. */
  readonly speed: MetresPerSecond;
  readonly neutral: boolean;
}

/** What the officials changed on the grid. */
export interface ScheduleChanges {
  readonly targetTimeMs?: number;
  readonly start?: number;
  readonly finish?: number;
}

interface RawSection {
  readonly from: number;
  readonly to: number;
  readonly time: number;
  readonly neutral: boolean;
}

/**
 * Schedule of a class on a course book, metres and seconds.
 * @throws RangeError where book or class are faulty: check them before.
 */
export function makeSchedule(book: CourseBook, raceClass: RaceClass, changes: ScheduleChanges = {}): Schedule {
  const start = changes.start ?? bookMetres(book, 'start');
  const finish = changes.finish ?? bookMetres(book, 'finish');
  if (!(finish > start)) throw new RangeError('the finish must lie after the start');
  const target = (changes.targetTimeMs ?? raceClass.targetTimeMs) / 1000;
  if (!(target > 0)) throw new RangeError('the target time must be above zero');
  const raw = rawSections(raceClass, start, finish);
  const total = raw.reduce((sum, s) => sum + s.time, 0);
  const neutral = raw.reduce((sum, s) => sum + (s.neutral ? s.time : 0), 0);
  const onlyAverages = total > neutral && target > neutral;
  const factor = onlyAverages ? (target - neutral) / (total - neutral) : target / total;
  const sections: ScheduleSection[] = [];
  let begins = 0;
  for (const s of raw) {
    const time = s.neutral && onlyAverages ? s.time : s.time * factor;
    sections.push({
      from: metres(s.from),
      to: metres(s.to),
      begins: seconds(begins),
      speed: metresPerSecond((s.to - s.from) / time),
      neutral: s.neutral,
    });
    begins += time;
  }
  return { start: metres(start), finish: metres(finish), targetTime: seconds(target), difference: seconds(target - total), sections };
}

function bookMetres(book: CourseBook, duty: 'start' | 'finish'): number {
  const row = book.checkpoints.find((c) => c.duty === duty);
  const at = row === undefined ? null : readPrintedMetres(row.at);
  if (at === null) throw new RangeError(`the course book has no readable ${duty}`);
  return at;
}

/** Sections cut to the course as it is run today: a moved line shortens or lengthens the first or last one. */
function rawSections(raceClass: RaceClass, start: number, finish: number): RawSection[] {
  const rows: RawSection[] = [];
  let from = 0;
  raceClass.sections.forEach((section, i) => {
    const printedTo = readPrintedMetres(section.to);
    if (printedTo === null) throw new RangeError(`section ${i + 1} has no readable end`);
    const last = i === raceClass.sections.length - 1;
    const cutFrom = i === 0 ? start : Math.max(from, start);
    const cutTo = last ? finish : Math.min(printedTo, finish);
    if (cutTo > cutFrom) rows.push({ from: cutFrom, to: cutTo, ...sectionTime(section, printedTo - from, cutTo - cutFrom) });
    from = printedTo;
  });
  if (rows.length === 0) throw new RangeError('the class has no section');
  return rows;
}

function sectionTime(section: RaceClass['sections'][number], printed: number, driven: number): { time: number; neutral: boolean } {
  if (section.kind === 'neutral') return { time: section.timeMs / 1000, neutral: true };
  const average = readPrintedSpeed(section.average);
  if (average === null || !(average > 0) || !(printed > 0)) throw new RangeError('a section has no readable average');
  return { time: driven / average, neutral: false };
}

/** Section that holds x; the first before the start, the last after the finish. */
export function sectionAt(schedule: Schedule, x: number): ScheduleSection {
  const { sections } = schedule;
  for (let i = sections.length - 1; i > 0; i--) {
    const section = sections[i] as ScheduleSection;
    if (x >= section.from) return section;
  }
  return sections[0] as ScheduleSection;
}

/** Target time at official distance x, seconds. 0 before the start, the official target time from the finish on. */
export function targetTimeAt(schedule: Schedule, x: number): Seconds {
  if (x <= schedule.start) return seconds(0);
  if (x >= schedule.finish) return schedule.targetTime;
  const section = sectionAt(schedule, x);
  return seconds(section.begins + (x - section.from) / section.speed);
}

/** Target speed at official distance x, m/s; never zero. */
export const targetSpeedAt = (schedule: Schedule, x: number): MetresPerSecond => sectionAt(schedule, x).speed;
