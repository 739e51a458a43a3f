import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { EventRules, ScoreRules } from '#shared/course/race-class.ts';
import type { MissingTime, OfficialRun } from '#shared/pace/score.ts';
import { type ScoredEntry, type StandingRow, standings } from '#shared/pace/score-standings.ts';

const SCORE: ScoreRules = {
  unitMs: 100,
  partUnit: 'cut',
  earlyPerUnit: 2,
  latePerUnit: 1,
  floor: 0,
  cap: 300,
  missing: { didNotStart: 600, didNotFinish: 500, noTime: null, excluded: null },
  counting: 'best',
};
const RULES: EventRules = {
  timeStart: 'scheduled',
  timeUnitMs: 10,
  rounding: 'cut',
  timeBasis: 'clock',
  ties: 'shared',
  sumOfRuns: 2,
  score: SCORE,
};
const TARGET = 1_200_000;
const DAY = Date.UTC(2027, 4, 8, 9, 0, 0);

/** A run that began `startMin` minutes after nine and ended so many ms off its target. */
const run = (attempt: number, startMin: number, errorMs: number, penalty = 0): OfficialRun => ({
  attempt,
  targetTimeMs: TARGET,
  result: { kind: 'timed', start: DAY + startMin * 60_000, finish: DAY + startMin * 60_000 + TARGET + errorMs },
  penalties: penalty === 0 ? [] : [{ points: penalty, reason: 'control' }],
});
const missing = (attempt: number, kind: MissingTime): OfficialRun => ({ attempt, targetTimeMs: TARGET, result: { kind }, penalties: [] });
const entry = (number: string, ...runs: OfficialRun[]): ScoredEntry => ({ entryId: `entry-${number}`, number, runs });

function list(rules: EventRules, entries: readonly ScoredEntry[]): readonly StandingRow[] {
  const result = standings(rules, entries);
  if (!result.ok) throw new Error(result.error.message);
  return result.value;
}

/**
 * Worked by hand: units of 0.1 s cut, 2 points a unit early, 1 late, cap 300; best two runs.
 *  3: +1.23 s 12, +0.40 s 4, -2.00 s 40 (left out)          = 16, complete at 10:20:00.400
 * 12: -0.35 s 6, +1.07 s 10                                  = 16, complete at 10:31:01.070
 * 21: 0.00 s 0, +0.95 s 9 with 20 penalties 29               = 29
 *  8: +45 s, cap 300, did not finish 500                     = 800
 *  5: +0.2 s 2, never started again 600                      = 602
 * 17: no time                                                = not ranked
 */
const FIELD = [
  entry('17', run(1, 3, 0), missing(2, 'no time')),
  entry('5', run(1, 4, 200)),
  entry('3', run(1, 0, 1_230), run(2, 60, 400), run(3, 120, -2_000)),
  entry('8', run(1, 1, 45_000), missing(2, 'did not finish')),
  entry('21', run(1, 2, 0), run(2, 62, 950, 20)),
  entry('12', run(1, 10, -350), run(2, 71, 1_070)),
];

const brief = (rows: readonly StandingRow[]) => rows.map((r) => [r.number, r.rank, r.points, r.tie, r.counted.join('+')]);

describe('a class worked out by hand', () => {
  it('shared rank: the next one stays free', () => {
    expect(brief(list(RULES, FIELD))).toEqual([
      ['3', 1, 16, 'shared', '1+2'],
      ['12', 1, 16, 'shared', '1+2'],
      ['21', 3, 29, 'none', '1+2'],
      ['5', 4, 602, 'none', '1'],
      ['8', 5, 800, 'none', '1+2'],
      ['17', null, null, 'none', '1+2'],
    ]);
  });

  it('earlier run: the score completed first goes first', () => {
    expect(brief(list({ ...RULES, ties: 'earlier run' }, FIELD)).slice(0, 3)).toEqual([
      ['3', 1, 16, 'earlier run', '1+2'],
      ['12', 2, 16, 'earlier run', '1+2'],
      ['21', 3, 29, 'none', '1+2'],
    ]);
  });

  it('every row says why', () => {
    const say = (rules: EventRules) => Object.fromEntries(list(rules, FIELD).map((r) => [r.number, r.sentence]));
    expect(say({ ...RULES, ties: 'rerun' })).toEqual({
      3: '16 points: 12 + 4; 1 run does not count. Level with no. 12: the rules ask for a rerun.',
      12: '16 points: 6 + 10. Level with no. 3: the rules ask for a rerun.',
      21: '29 points: 0 + 29.',
      5: '602 points: 2 + 600 for a run not started.',
      8: '800 points: 300 + 500.',
      17: 'Not ranked. Run 2: no time; the rules give no points for that.',
    });
    expect(say({ ...RULES, ties: 'earlier run' })[12]).toBe(
      '16 points: 6 + 10. As many points as no. 3; the score completed earlier goes first.',
    );
    const strict = { ...RULES, score: { ...SCORE, missing: { ...SCORE.missing, didNotStart: null } } };
    expect(say(strict)[5]).toBe('Not ranked: 2 runs count and one is missing.');
  });

  it('the first runs count where the rules say so', () => {
    const rows = list({ ...RULES, score: { ...SCORE, counting: 'first' } }, [
      entry('3', run(1, 0, 1_230), run(2, 60, -2_000), run(3, 120, 400)),
    ]);
    expect(brief(rows)).toEqual([['3', 1, 52, 'none', '1+2']]);
  });

  it('the score completed at the same instant stays shared', () => {
    const same = [entry('1', run(1, 0, 100), run(2, 60, 0)), entry('2', run(1, 5, 100), run(2, 60, 0))];
    expect(brief(list({ ...RULES, ties: 'earlier run' }, same)).map((r) => [r[1], r[3]])).toEqual([
      [1, 'shared'],
      [1, 'shared'],
    ]);
  });

  it.each([
    ['the same entry twice', [entry('3', run(1, 0, 0)), entry('3', run(1, 0, 0))], RULES, 'REPEATED_ENTRY'],
    ['two results for one run', [entry('3', run(1, 0, 0), run(1, 60, 0))], RULES, 'REPEATED_ATTEMPT'],
    ['half a run counting', [entry('3', run(1, 0, 0))], { ...RULES, sumOfRuns: 0.5 }, 'BAD_RULES'],
    ['a run with half a millisecond', [entry('3', run(1, 0, 0.5))], RULES, 'NOT_WHOLE'],
  ])('%s is a typed fault', (_, entries, rules, code) => {
    const result = standings(rules, entries);
    expect(result.ok ? null : result.error.code).toBe(code);
  });
});

const anyRun = fc.oneof(
  {
    arbitrary: fc.tuple(fc.nat(30), fc.integer({ min: -900, max: 900 })).map(
      ([m, e]) =>
        (n: number) =>
          run(n, n * 60 + m, e),
    ),
    weight: 5,
  },
  {
    arbitrary: fc
      .constantFrom<MissingTime>('did not start', 'did not finish', 'no time', 'excluded')
      .map((k) => (n: number) => missing(n, k)),
    weight: 1,
  },
);
const field = fc
  .array(fc.array(anyRun, { maxLength: 4 }), { minLength: 1, maxLength: 9 })
  .map((all) => all.map((runs, i) => entry(String(i + 1), ...runs.map((make, n) => make(n + 1)))));
const anyRules = fc
  .record({ ties: fc.constantFrom<EventRules['ties']>('shared', 'earlier run', 'rerun'), sumOfRuns: fc.integer({ min: 1, max: 3 }) })
  .chain((r) =>
    fc.constantFrom<ScoreRules['counting']>('best', 'first').map((counting) => ({ ...RULES, ...r, score: { ...SCORE, counting } })),
  );

describe('whatever the field', () => {
  it('entries and runs in any order give the same list', () => {
    fc.assert(
      fc.property(
        anyRules,
        field.chain((f) => fc.tuple(fc.constant(f), fc.shuffledSubarray(f, { minLength: f.length }))),
        (rules, [straight, shuffled]) => {
          const turned = shuffled.map((e) => ({ ...e, runs: [...e.runs].reverse() }));
          expect(list(rules, turned)).toEqual(list(rules, straight));
        },
      ),
    );
  });

  it('ties are mutual, ranks count those before, and points are whole', () => {
    fc.assert(
      fc.property(anyRules, field, (rules, entries) => {
        const rows = list(rules, entries);
        for (const a of rows) {
          if (a.rank === null || a.points === null) {
            expect(a.points).toBeNull();
            continue;
          }
          expect(Number.isSafeInteger(a.points)).toBe(true);
          const before = rows.filter((b) => b.rank !== null && b.rank < (a.rank as number));
          expect(a.rank).toBe(before.length + 1);
          expect(before.every((b) => (b.points as number) <= (a.points as number))).toBe(true);
          const same = rows.filter((b) => b !== a && b.rank === a.rank);
          expect(same.length > 0).toBe(a.tie === 'shared' || a.tie === 'rerun');
          for (const b of same) {
            expect([b.tie, b.points]).toEqual([a.tie, a.points]);
            expect(b.sentence).toContain(`no. ${a.number}`);
          }
        }
      }),
    );
  });

  it('a better run never makes a place worse', () => {
    fc.assert(
      fc.property(anyRules, field, fc.nat(8), (rules, entries, who) => {
        const chosen = entries[who % entries.length] as ScoredEntry;
        const index = chosen.runs.findIndex((r) => r.result.kind === 'timed');
        fc.pre(index >= 0);
        const perfect = (r: OfficialRun): OfficialRun =>
          r.result.kind === 'timed' ? { ...r, result: { ...r.result, finish: r.result.start + TARGET } } : r;
        const better = entries.map((e) => (e === chosen ? { ...e, runs: e.runs.map((r, i) => (i === index ? perfect(r) : r)) } : e));
        const pointsIn = (f: readonly ScoredEntry[]) =>
          list(rules, f).find((r) => r.entryId === chosen.entryId)?.points ?? Number.POSITIVE_INFINITY;
        expect(pointsIn(better)).toBeLessThanOrEqual(pointsIn(entries));
      }),
    );
  });

  it('best runs: more runs never cost points', () => {
    fc.assert(
      fc.property(field, fc.integer({ min: -900, max: 900 }), (entries, e) => {
        const [first] = entries as [ScoredEntry];
        fc.pre(first.runs.length >= RULES.sumOfRuns);
        const more = { ...first, runs: [...first.runs, run(9, 900, e)] };
        const of = (x: ScoredEntry) => list(RULES, [x])[0]?.points ?? Number.POSITIVE_INFINITY;
        expect(of(more)).toBeLessThanOrEqual(of(first));
      }),
    );
  });
});
