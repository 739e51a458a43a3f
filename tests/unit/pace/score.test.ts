import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { eventRulesSchema } from '#shared/api/race-class.ts';
import { type EventRules, PLAIN_SCORE, type ScoreRules } from '#shared/course/race-class.ts';
import { errorPoints, type OfficialRun, scoreRun } from '#shared/pace/score.ts';
import { cutTo, officialElapsed, roundTo } from '#shared/pace/score-time.ts';

/** Scores of one run: whole numbers, against figures worked out by hand and against BigInt arithmetic. */

const RULES: EventRules = { timeStart: 'scheduled', timeUnitMs: 10, rounding: 'cut', timeBasis: 'elapsed', ties: 'shared', sumOfRuns: 1 };
const SCORE: ScoreRules = {
  unitMs: 100,
  partUnit: 'cut',
  earlyPerUnit: 2,
  latePerUnit: 1,
  floor: 0,
  cap: 300,
  missing: { didNotStart: 600, didNotFinish: 500, noTime: 400, excluded: null },
  counting: 'best',
};
const TARGET = 1_200_000;
const START = Date.UTC(2027, 4, 8, 9, 0, 0);
const timed = (finish: number, start = START): OfficialRun => ({
  attempt: 1,
  targetTimeMs: TARGET,
  result: { kind: 'timed', start, finish },
  penalties: [],
});
const value = <T>(r: { ok: true; value: T } | { ok: false; error: { message: string } }): T => {
  if (!r.ok) throw new Error(r.error.message);
  return r.value;
};

describe('official elapsed time, by hand', () => {
  // start 09:00:00.096, finish 09:20:00.104: 1 200 008 ms. Cut clocks to 10 ms: .090 and .100; rounded: .100 and .100.
  const [start, finish] = [START + 96, START + 1_200_104];
  it.each([
    ['clock', 'cut', 10, 1_200_010],
    ['clock', 'round', 10, 1_200_000],
    ['elapsed', 'cut', 10, 1_200_000],
    ['elapsed', 'round', 10, 1_200_010],
    ['clock', 'cut', 1000, 1_200_000],
    ['elapsed', 'cut', 1, 1_200_008],
  ] as const)('%s times, %s to %d ms: %d', (timeBasis, rounding, timeUnitMs, want) => {
    expect(value(officialElapsed({ timeBasis, rounding, timeUnitMs }, start, finish))).toBe(want);
  });

  it('a half goes away from zero, also in microseconds and before 1970', () => {
    expect([roundTo(5, 10), roundTo(-5, 10), roundTo(4, 10), roundTo(-4, 10)]).toEqual([10, -10, 0, 0]);
    expect(Object.is(roundTo(-4, 10), 0)).toBe(true);
    expect([cutTo(-1, 10), cutTo(-10, 10), cutTo(9, 10)]).toEqual([-10, -10, 0]);
    const rules = { timeBasis: 'elapsed', rounding: 'round', timeUnitMs: 1 } as const;
    expect(value(officialElapsed(rules, 0, 1_500, 1000))).toBe(2);
    expect(value(officialElapsed(rules, 0, 1_499, 1000))).toBe(1);
    expect(value(officialElapsed({ ...rules, timeBasis: 'clock', rounding: 'cut' }, -1_500, 2_999, 1000))).toBe(4);
  });

  it.each([
    ['midnight', Date.UTC(2027, 4, 8, 23, 55), Date.UTC(2027, 4, 9, 0, 15)],
    ['the leap day', Date.UTC(2028, 1, 29, 23, 50), Date.UTC(2028, 2, 1, 0, 10)],
    ['the end of a year', Date.UTC(2027, 11, 31, 23, 59), Date.UTC(2028, 0, 1, 0, 19)],
  ])('across %s, 20 minutes are 20 minutes', (_, from, to) => {
    for (const timeBasis of ['clock', 'elapsed'] as const) {
      expect(value(officialElapsed({ timeBasis, rounding: 'cut', timeUnitMs: 1000 }, from, to))).toBe(TARGET);
    }
  });

  it.each([
    ['half a millisecond', { timeUnitMs: 10 }, START, START + 0.5, 'NOT_WHOLE'],
    ['no number', { timeUnitMs: 10 }, Number.NaN, START, 'NOT_WHOLE'],
    ['finish first', { timeUnitMs: 10 }, START, START - 1, 'FINISH_BEFORE_START'],
    ['a unit that divides no minute', { timeUnitMs: 7, timeBasis: 'clock' as const }, START, START, 'BAD_RULES'],
    ['a unit that is not whole', { timeUnitMs: 0.5 }, START, START, 'BAD_RULES'],
    ['ages apart', { timeUnitMs: 1 }, -Number.MAX_SAFE_INTEGER, Number.MAX_SAFE_INTEGER, 'TOO_LARGE'],
  ])('%s is a typed fault', (_, rules, start, finish, code) => {
    const result = officialElapsed({ ...RULES, ...rules }, start, finish);
    expect(result.ok ? null : result.error.code).toBe(code);
  });
});

describe('points of a run, by hand', () => {
  // error in ms -> points with 100 ms units, 2 a unit early, 1 a unit late, cap 300, by what a part of a unit counts
  it.each([
    [0, 0, 0, 0],
    [99, 0, 1, 1],
    [49, 0, 0, 1],
    [50, 0, 1, 1],
    [-99, 0, 2, 2],
    [-150, 2, 4, 4],
    [1_230, 12, 12, 13],
    [-1_230, 24, 24, 26],
    [29_999, 299, 300, 300],
    [-600_000, 300, 300, 300],
  ])('%d ms: %d cut, %d rounded, %d begun', (error, cut, round, begun) => {
    expect((['cut', 'round', 'begun'] as const).map((partUnit) => errorPoints({ ...SCORE, partUnit }, error))).toEqual([cut, round, begun]);
  });

  it('floor, penalties beyond the cap, and the sentence', () => {
    const rules = { ...RULES, score: { ...SCORE, floor: 5 } };
    expect(value(scoreRun(rules, timed(START + TARGET)))).toMatchObject({
      points: 5,
      timeErrorMs: 0,
      sentence: 'Run 1: on zero, 5 points.',
    });
    const late = { ...timed(START + TARGET + 65_437), penalties: [{ points: 20, reason: 'false start' }] };
    expect(value(scoreRun(rules, late))).toMatchObject({
      elapsedMs: 1_265_430,
      timeErrorMs: 65_430,
      penaltyPoints: 20,
      points: 320,
      sentence: 'Run 1: 65.430 s late, 300 points and 20 in penalties.',
    });
  });

  it('a run without a time gets what the rules say, or nothing', () => {
    const of = (kind: 'did not start' | 'did not finish' | 'no time' | 'excluded', rules = { ...RULES, score: SCORE } as EventRules) =>
      value(scoreRun(rules, { attempt: 2, targetTimeMs: TARGET, result: { kind }, penalties: [{ points: 7, reason: 'late at control' }] }));
    expect([of('did not start').points, of('did not finish').points, of('no time').points, of('excluded').points]).toEqual([
      607,
      507,
      407,
      null,
    ]);
    expect(of('excluded').sentence).toBe('Run 2: excluded; the rules give no points for that.');
    expect(of('no time', RULES).points).toBeNull();
  });

  it('rules without a score count every millisecond; the schema takes both', () => {
    // the elapsed time is cut, 1 198 761 to 1 198 760, so the car is 1.240 s early
    expect(value(scoreRun(RULES, timed(START + TARGET - 1_239))).points).toBe(1_240);
    expect(eventRulesSchema.parse(RULES)).toEqual(RULES);
    expect(eventRulesSchema.parse({ ...RULES, score: SCORE })).toEqual({ ...RULES, score: SCORE });
    expect(eventRulesSchema.safeParse({ ...RULES, score: { ...SCORE, unitMs: 0.5 } }).success).toBe(false);
  });

  it.each([
    ['a penalty of half a point', { ...timed(START + TARGET), penalties: [{ points: 0.5, reason: '' }] }, SCORE, 'BAD_PENALTY'],
    ['a target that is not whole', { ...timed(START + TARGET), targetTimeMs: 1.5 }, SCORE, 'NOT_WHOLE'],
    ['attempt 0', { ...timed(START + TARGET), attempt: 0 }, SCORE, 'ODD_ATTEMPT'],
    ['a unit of 0', timed(START + TARGET), { ...SCORE, unitMs: 0 }, 'BAD_RULES'],
    ['a floor above the cap', timed(START + TARGET), { ...SCORE, floor: 301 }, 'BAD_RULES'],
    ['points past counting', timed(START + TARGET + 3_000), { ...PLAIN_SCORE, latePerUnit: Number.MAX_SAFE_INTEGER }, 'TOO_LARGE'],
  ])('%s is a typed fault', (_, run, score, code) => {
    const result = scoreRun({ ...RULES, score }, run);
    expect(result.ok ? null : result.error.code).toBe(code);
  });
});

const instant = fc.integer({ min: -2_000_000_000_000, max: 4_000_000_000_000 });
const span = fc.integer({ min: 0, max: 86_400_000 });
const unit = fc.constantFrom(1, 2, 5, 10, 20, 50, 100, 200, 500, 1000, 6_000, 60_000);
const scoreRules = fc.record({
  unitMs: fc.integer({ min: 1, max: 60_000 }),
  partUnit: fc.constantFrom('cut' as const, 'round' as const, 'begun' as const),
  earlyPerUnit: fc.integer({ min: 0, max: 1000 }),
  latePerUnit: fc.integer({ min: 0, max: 1000 }),
  floor: fc.integer({ min: 0, max: 50 }),
  cap: fc.option(fc.integer({ min: 50, max: 1_000_000 })),
  missing: fc.constant(SCORE.missing),
  counting: fc.constant('best' as const),
});

describe('whatever the times', () => {
  it('cut and round agree with BigInt, in any ticks', () => {
    // stamps up to 2^53: where dividing by the unit in floating point would lose the last digit
    const ticks = fc.oneof(
      instant,
      fc
        .maxSafeInteger()
        .map((n) => n - (n % 1) - 60_000_000)
        .filter((n) => Number.isSafeInteger(n)),
    );
    fc.assert(
      fc.property(ticks, fc.integer({ min: 1, max: 60_000_000 }), (n, u) => {
        const [x, y] = [BigInt(n), BigInt(u)];
        const floor = x / y - (x % y < 0n ? 1n : 0n);
        expect(BigInt(cutTo(n, u))).toBe(floor * y);
        const size = x < 0n ? -x : x;
        const half = ((2n * size + y) / (2n * y)) * y;
        expect(BigInt(roundTo(n, u))).toBe(x < 0n ? -half : half);
        expect(roundTo(-n, u)).toBe(-roundTo(n, u) + 0);
      }),
      { numRuns: 2000 },
    );
  });

  it('elapsed times are whole units, within a unit of the truth when cut and half a unit a clock when rounded', () => {
    fc.assert(
      fc.property(instant, span, unit, fc.constantFrom(1 as const, 1000 as const), (from, ms, timeUnitMs, ticksPerMs) => {
        const [start, finish] = [from * ticksPerMs, (from + ms) * ticksPerMs];
        const of = (timeBasis: 'clock' | 'elapsed', rounding: 'cut' | 'round') =>
          value(officialElapsed({ timeBasis, rounding, timeUnitMs }, start, finish, ticksPerMs));
        const [cutOnce, roundOnce, cutClocks, roundClocks] = [
          of('elapsed', 'cut'),
          of('elapsed', 'round'),
          of('clock', 'cut'),
          of('clock', 'round'),
        ];
        for (const n of [cutOnce, roundOnce, cutClocks, roundClocks]) expect(n % timeUnitMs).toBe(0);
        expect(ms - cutOnce).toBeGreaterThanOrEqual(0);
        expect(ms - cutOnce).toBeLessThan(timeUnitMs);
        expect(2 * Math.abs(ms - roundOnce)).toBeLessThanOrEqual(timeUnitMs);
        expect(Math.abs(ms - cutClocks)).toBeLessThan(timeUnitMs);
        expect(Math.abs(ms - roundClocks)).toBeLessThanOrEqual(timeUnitMs);
      }),
    );
  });

  it('points are whole, within floor and cap, and never fall as the error grows on either side', () => {
    const error = fc.integer({ min: 0, max: 10_000_000 });
    fc.assert(
      fc.property(scoreRules, error, error, fc.constantFrom(-1, 1), (score, a, b, side) => {
        const [small, large] = [Math.min(a, b), Math.max(a, b)];
        const [few, many] = [errorPoints(score, side * small), errorPoints(score, side * large)];
        expect(Number.isSafeInteger(few) && Number.isSafeInteger(many)).toBe(true);
        expect(few).toBeLessThanOrEqual(many);
        expect(few).toBeGreaterThanOrEqual(score.floor);
        if (score.cap !== null) expect(many).toBeLessThanOrEqual(score.cap);
        if (score.earlyPerUnit === score.latePerUnit) expect(errorPoints(score, -large)).toBe(many);
      }),
      { numRuns: 1000 },
    );
  });

  it('any number that is not whole is refused, never scored', () => {
    const odd = fc.double().filter((x) => !Number.isSafeInteger(x));
    fc.assert(
      fc.property(odd, fc.boolean(), (x, first) => {
        const run = first ? timed(START, x) : timed(x);
        const result = scoreRun(RULES, run);
        expect(result.ok ? null : result.error.code).toBe('NOT_WHOLE');
      }),
    );
  });
});
