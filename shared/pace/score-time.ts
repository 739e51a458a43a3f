import type { EventRules } from '#shared/course/race-class.ts';
import { fail, ok, type Result } from '#shared/result.ts';

/** Official times by the rules of an event. Whole numbers throughout: an error of one unit decides events. */

export interface ScoreFault {
  readonly code:
    | 'NOT_WHOLE'
    | 'BAD_RULES'
    | 'FINISH_BEFORE_START'
    | 'TOO_LARGE'
    | 'BAD_PENALTY'
    | 'REPEATED_ATTEMPT'
    | 'REPEATED_ENTRY'
    | 'ODD_ATTEMPT';
  /** Tells the person what to do. */
  readonly message: string;
}

export const scoreFault = (code: ScoreFault['code'], message: string): { ok: false; error: ScoreFault } => fail({ code, message });

export type TimeRules = Pick<EventRules, 'timeUnitMs' | 'rounding' | 'timeBasis'>;

/** Stamps of official clocks per millisecond: 1 where they are whole milliseconds, 1000 where microseconds. */
export type TicksPerMs = 1 | 10 | 100 | 1000;

const MINUTE_MS = 60_000;

/** Down to a whole unit, as a clock with fewer digits shows it: towards the past, also before 1970. */
export function cutTo(ticks: number, unit: number): number {
  const part = ((ticks % unit) + unit) % unit;
  return ticks - part + 0;
}

/** To the nearest whole unit; a half goes away from zero. */
export function roundTo(ticks: number, unit: number): number {
  const size = Math.abs(ticks);
  const part = size % unit;
  const rounded = size - part + (2 * part >= unit ? unit : 0);
  // adding 0 turns -0 into 0
  return (ticks < 0 ? -rounded : rounded) + 0;
}

/**
 * Elapsed time that counts, whole milliseconds. `start` and `finish` are instants of the official clock since 1970 in ticks
 * (a known offset between start clock and finish clock is taken off before). Basis `clock`: each instant is cut or rounded
 * first, then they are subtracted; `elapsed`: the difference is cut or rounded once. Midnight, months and years need nothing:
 * instants count on. Source: rules of events, as data; common practice.
 */
export function officialElapsed(rules: TimeRules, start: number, finish: number, ticksPerMs: TicksPerMs = 1): Result<number, ScoreFault> {
  const bad = badRules(rules) ?? badInstants(start, finish);
  if (bad !== null) return fail(bad);
  const unit = rules.timeUnitMs * ticksPerMs;
  const whole = rules.rounding === 'cut' ? cutTo : roundTo;
  const ticks = rules.timeBasis === 'clock' ? whole(finish, unit) - whole(start, unit) : whole(finish - start, unit);
  return Number.isSafeInteger(ticks)
    ? ok(ticks / ticksPerMs)
    : scoreFault('TOO_LARGE', 'Start and finish lie too far apart. Check both times.');
}

function badRules({ timeUnitMs, timeBasis }: TimeRules): ScoreFault | null {
  if (!Number.isSafeInteger(timeUnitMs) || timeUnitMs < 1 || timeUnitMs > MINUTE_MS) {
    return { code: 'BAD_RULES', message: 'The unit of official times must be a whole number of milliseconds, at most a minute.' };
  }
  if (timeBasis === 'clock' && MINUTE_MS % timeUnitMs !== 0) {
    return {
      code: 'BAD_RULES',
      message: 'Clock times can only be cut to a unit that divides a minute, such as 10, 100 or 1000 ms. Mend the event’s rules.',
    };
  }
  return null;
}

function badInstants(start: number, finish: number): ScoreFault | null {
  if (!Number.isSafeInteger(start) || !Number.isSafeInteger(finish)) {
    return {
      code: 'NOT_WHOLE',
      message: 'Official times must be whole numbers of the clock’s unit. Enter them as the clock printed them.',
    };
  }
  if (finish < start) {
    return { code: 'FINISH_BEFORE_START', message: 'The finish lies before the start. Check both times and the day.' };
  }
  return null;
}
