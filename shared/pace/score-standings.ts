import { type EventRules, PLAIN_SCORE } from '#shared/course/race-class.ts';
import { type OfficialRun, pointWords, type RunScore, scoreRun } from '#shared/pace/score.ts';
import { type ScoreFault, scoreFault, type TicksPerMs } from '#shared/pace/score-time.ts';
import { fail, ok, type Result } from '#shared/result.ts';

/** The order of one class. Fewest points win; the same entries in any order give the same list. */

export interface ScoredEntry {
  readonly entryId: string;
  /** As painted on the car. */
  readonly number: string;
  readonly runs: readonly OfficialRun[];
}

export interface StandingRow {
  readonly entryId: string;
  readonly number: string;
  /** 1-based; null where the entry is not ranked. */
  readonly rank: number | null;
  readonly points: number | null;
  /** All runs in order of attempt, and which attempts count. */
  readonly runs: readonly RunScore[];
  readonly counted: readonly number[];
  /** shared: same rank as others. earlier run: a tie, told apart by which score was complete first. rerun: the rules ask for one. */
  readonly tie: 'none' | 'shared' | 'earlier run' | 'rerun';
  /** Why the row stands where it stands. */
  readonly sentence: string;
}

interface Tally {
  readonly entry: ScoredEntry;
  readonly runs: readonly RunScore[];
  readonly counted: readonly RunScore[];
  readonly points: number | null;
  /** Instant of the finish that completed the score; null where no counted run has a time. */
  readonly completed: number | null;
  /** Runs still missing to the number that counts. */
  readonly lacking: number;
}

/**
 * Ranks the entries of one class. An entry with fewer runs than `sumOfRuns` has not started the others. Ties by the rules:
 * `shared` and `rerun` give the same rank and leave the next ones free; `earlier run` puts first whoever completed the score
 * first by the official clock (still shared where those instants are equal or missing).
 */
export function standings(
  rules: EventRules,
  entries: readonly ScoredEntry[],
  ticksPerMs: TicksPerMs = 1,
): Result<readonly StandingRow[], ScoreFault> {
  if (!Number.isSafeInteger(rules.sumOfRuns) || rules.sumOfRuns < 1) {
    return scoreFault('BAD_RULES', 'The number of runs that count must be a whole number of at least 1.');
  }
  const tallies: Tally[] = [];
  const seen = new Set<string>();
  for (const entry of entries) {
    if (seen.has(entry.entryId)) return scoreFault('REPEATED_ENTRY', `Entry ${entry.number} is listed twice. Take one out.`);
    seen.add(entry.entryId);
    const tally = tallyOf(rules, entry, ticksPerMs);
    if (!tally.ok) return tally;
    tallies.push(tally.value);
  }
  const compare = comparator(rules);
  tallies.sort((a, b) => compare(a, b) || byNumber(a.entry, b.entry));
  return ok(tallies.map((tally) => rowOf(rules, tallies, tally, compare)));
}

function tallyOf(rules: EventRules, entry: ScoredEntry, ticksPerMs: TicksPerMs): Result<Tally, ScoreFault> {
  const runs: RunScore[] = [];
  for (const run of entry.runs) {
    const scored = scoreRun(rules, run, ticksPerMs);
    if (!scored.ok) return fail({ ...scored.error, message: `Entry ${entry.number}: ${scored.error.message}` });
    if (runs.some((r) => r.attempt === run.attempt)) {
      return scoreFault('REPEATED_ATTEMPT', `Entry ${entry.number} has two results for run ${run.attempt}. Keep one.`);
    }
    runs.push(scored.value);
  }
  runs.sort((a, b) => a.attempt - b.attempt);
  const score = rules.score ?? PLAIN_SCORE;
  const order = score.counting === 'first' ? runs : [...runs].sort((a, b) => (a.points ?? Infinity) - (b.points ?? Infinity));
  const present = order.slice(0, rules.sumOfRuns);
  const lacking = rules.sumOfRuns - present.length;
  const unstarted = score.missing.didNotStart;
  const unranked = present.some((r) => r.points === null) || (lacking > 0 && unstarted === null);
  const points = unranked ? null : present.reduce((sum, r) => sum + (r.points ?? 0), lacking * (unstarted ?? 0));
  if (points !== null && !Number.isSafeInteger(points))
    return scoreFault('TOO_LARGE', `Entry ${entry.number} comes to more points than can be counted.`);
  const finishes = present.flatMap((r) => (r.finish === null ? [] : [r.finish]));
  const completed = finishes.length === 0 ? null : Math.max(...finishes);
  return ok({ entry, runs, counted: [...present].sort((a, b) => a.attempt - b.attempt), points, completed, lacking });
}

type Compare = (a: Tally, b: Tally) => number;

/** 0 where the rules leave two entries level. */
function comparator(rules: EventRules): Compare {
  return (a, b) => {
    if (a.points === null || b.points === null) return Number(a.points === null) - Number(b.points === null);
    if (a.points !== b.points || rules.ties !== 'earlier run') return a.points - b.points;
    // a score without any finish counts as completed last; two such are level
    const [x, y] = [a.completed ?? Infinity, b.completed ?? Infinity];
    return x === y ? 0 : x < y ? -1 : 1;
  };
}

/** For rows the rules leave level: shorter numbers first, then by their characters, so that the list is always the same. */
const byNumber = (a: ScoredEntry, b: ScoredEntry): number =>
  a.number.length - b.number.length || byText(a.number, b.number) || byText(a.entryId, b.entryId);
const byText = (a: string, b: string): number => (a < b ? -1 : a > b ? 1 : 0);

function rowOf(rules: EventRules, all: readonly Tally[], tally: Tally, compare: Compare): StandingRow {
  const { entry, runs, points } = tally;
  const base = { entryId: entry.entryId, number: entry.number, runs, counted: tally.counted.map((r) => r.attempt), points };
  if (points === null) return { ...base, rank: null, tie: 'none', sentence: unrankedSentence(rules, tally) };
  const rank = all.filter((t) => compare(t, tally) < 0).length + 1;
  const level = all.filter((t) => t !== tally && compare(t, tally) === 0).map((t) => t.entry.number);
  const equal = all.filter((t) => t !== tally && t.points === points).map((t) => t.entry.number);
  const tie = level.length > 0 ? (rules.ties === 'rerun' ? 'rerun' : 'shared') : equal.length > 0 ? 'earlier run' : 'none';
  return { ...base, rank, tie, sentence: `${sumWords(rules, tally)}${tieWords(tie, level, equal)}` };
}

function sumWords(rules: EventRules, { points, counted, lacking, runs }: Tally): string {
  const parts = counted.map((r) => String(r.points));
  const unstarted = (rules.score ?? PLAIN_SCORE).missing.didNotStart;
  for (let i = 0; i < lacking; i++) parts.push(`${unstarted} for a run not started`);
  const left = runs.length - counted.length;
  const dropped = left === 0 ? '' : `; ${left === 1 ? '1 run does' : `${left} runs do`} not count`;
  return `${pointWords(points ?? 0)}${parts.length > 1 ? `: ${parts.join(' + ')}` : ''}${dropped}.`;
}

function tieWords(tie: StandingRow['tie'], level: readonly string[], equal: readonly string[]): string {
  if (tie === 'shared') return ` Shares the place with ${numbers(level)}.`;
  if (tie === 'rerun') return ` Level with ${numbers(level)}: the rules ask for a rerun.`;
  if (tie === 'earlier run') return ` As many points as ${numbers(equal)}; the score completed earlier goes first.`;
  return '';
}

const numbers = (list: readonly string[]): string => `no. ${list.join(', no. ')}`;

function unrankedSentence(rules: EventRules, { counted, lacking }: Tally): string {
  const missing = counted.find((r) => r.points === null);
  if (missing !== undefined) return `Not ranked. ${missing.sentence}`;
  return `Not ranked: ${rules.sumOfRuns} runs count and ${lacking === 1 ? 'one is' : `${lacking} are`} missing.`;
}
