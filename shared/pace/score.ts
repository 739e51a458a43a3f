import { type EventRules, PLAIN_SCORE, type ScoreRules } from '#shared/course/race-class.ts';
import { cutTo, officialElapsed, roundTo, type ScoreFault, scoreFault, type TicksPerMs } from '#shared/pace/score-time.ts';
import { fail, ok, type Result } from '#shared/result.ts';

/** Points of one run, fewest best. All in whole numbers. */

export type MissingTime = 'did not start' | 'did not finish' | 'no time' | 'excluded';

export interface Penalty {
  readonly points: number;
  readonly reason: string;
}

export interface OfficialRun {
  /** 1-based, in the order of the entry's runs. */
  readonly attempt: number;
  readonly targetTimeMs: number;
  /** Instants of the official clock in ticks (see `officialElapsed`), or why there is no time. `excluded`: say, over the cap or under the floor speed. */
  readonly result: { readonly kind: 'timed'; readonly start: number; readonly finish: number } | { readonly kind: MissingTime };
  readonly penalties: readonly Penalty[];
}

export interface RunScore {
  readonly attempt: number;
  readonly kind: 'timed' | MissingTime;
  readonly elapsedMs: number | null;
  /** Positive = late, negative = early; whole milliseconds. */
  readonly timeErrorMs: number | null;
  readonly penaltyPoints: number;
  /** With penalties; null where the rules give such a run no points. */
  readonly points: number | null;
  /** Instant in ticks that completed the run; null without a time. */
  readonly finish: number | null;
  /** How the points came about. */
  readonly sentence: string;
}

/** Points for a time error in whole milliseconds, positive = late: whole units by the rule, times points, within floor and cap. */
export function errorPoints(score: ScoreRules, timeErrorMs: number): number {
  const size = Math.abs(timeErrorMs);
  const whole = score.partUnit === 'round' ? roundTo(size, score.unitMs) : cutTo(size, score.unitMs);
  const begun = score.partUnit === 'begun' && whole < size ? 1 : 0;
  const points = (whole / score.unitMs + begun) * (timeErrorMs < 0 ? score.earlyPerUnit : score.latePerUnit);
  const floored = Math.max(points, score.floor);
  return score.cap === null ? floored : Math.min(floored, score.cap);
}

/** Scores one run by the event's rules. */
export function scoreRun(rules: EventRules, run: OfficialRun, ticksPerMs: TicksPerMs = 1): Result<RunScore, ScoreFault> {
  const score = rules.score ?? PLAIN_SCORE;
  const bad = badScoreRules(score) ?? badRun(run);
  if (bad !== null) return fail(bad);
  const penaltyPoints = run.penalties.reduce((sum, p) => sum + p.points, 0);
  const { attempt, result } = run;
  if (result.kind !== 'timed') {
    const given = missingPoints(score, result.kind);
    const points = given === null ? null : given + penaltyPoints;
    const sentence = missingSentence(attempt, result.kind, given, penaltyPoints);
    return safe({ attempt, kind: result.kind, elapsedMs: null, timeErrorMs: null, penaltyPoints, points, finish: null, sentence });
  }
  const elapsed = officialElapsed(rules, result.start, result.finish, ticksPerMs);
  if (!elapsed.ok) return elapsed;
  const timeErrorMs = elapsed.value - run.targetTimeMs;
  const own = errorPoints(score, timeErrorMs);
  const sentence = `Run ${attempt}: ${errorWords(timeErrorMs)}, ${pointWords(own)}${penaltyWords(penaltyPoints)}.`;
  const timed = { attempt, kind: 'timed' as const, elapsedMs: elapsed.value, timeErrorMs };
  return safe({ ...timed, penaltyPoints, points: own + penaltyPoints, finish: result.finish, sentence });
}

const safe = (run: RunScore): Result<RunScore, ScoreFault> =>
  Number.isSafeInteger(run.points ?? 0) && Number.isSafeInteger(run.timeErrorMs ?? 0)
    ? ok(run)
    : scoreFault('TOO_LARGE', `Run ${run.attempt} comes to more points than can be counted. Check its times, or give the rules a cap.`);

function missingPoints({ missing }: ScoreRules, kind: MissingTime): number | null {
  if (kind === 'did not start') return missing.didNotStart;
  if (kind === 'did not finish') return missing.didNotFinish;
  return kind === 'no time' ? missing.noTime : missing.excluded;
}

function badScoreRules(score: ScoreRules): ScoreFault | null {
  const { missing: m } = score;
  const counts = [score.earlyPerUnit, score.latePerUnit, score.floor, score.cap, m.didNotStart, m.didNotFinish, m.noTime, m.excluded];
  const message = 'The rules of scoring need whole numbers, none below zero, a unit of at least 1 ms and a floor not above the cap.';
  const sound = Number.isSafeInteger(score.unitMs) && score.unitMs > 0 && counts.every((n) => n === null || isCount(n));
  return sound && (score.cap === null || score.floor <= score.cap) ? null : { code: 'BAD_RULES', message };
}

function badRun({ attempt, targetTimeMs, penalties }: OfficialRun): ScoreFault | null {
  if (!isCount(attempt) || attempt < 1) return { code: 'ODD_ATTEMPT', message: 'Runs are numbered from 1 on.' };
  if (!Number.isSafeInteger(targetTimeMs) || targetTimeMs <= 0) {
    return { code: 'NOT_WHOLE', message: `The target time of run ${attempt} must be a whole number of milliseconds above zero.` };
  }
  if (penalties.every((p) => isCount(p.points))) return null;
  return { code: 'BAD_PENALTY', message: `A penalty of run ${attempt} is no whole number of points. Enter 0 or more.` };
}

const isCount = (n: number): boolean => Number.isSafeInteger(n) && n >= 0;

export const pointWords = (points: number): string => (points === 1 ? '1 point' : `${points} points`);
const penaltyWords = (points: number): string => (points === 0 ? '' : ` and ${points} in penalties`);

/** Whole milliseconds as seconds and a word, without any float on the way. */
function errorWords(ms: number): string {
  if (ms === 0) return 'on zero';
  const size = Math.abs(ms);
  const part = String(size % 1000).padStart(3, '0');
  return `${(size - (size % 1000)) / 1000}.${part} s ${ms > 0 ? 'late' : 'early'}`;
}

function missingSentence(attempt: number, kind: MissingTime, given: number | null, penalties: number): string {
  if (given === null) return `Run ${attempt}: ${kind}; the rules give no points for that.`;
  return `Run ${attempt}: ${kind}, ${pointWords(given)}${penaltyWords(penalties)} by the rules.`;
}
