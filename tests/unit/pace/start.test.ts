import { describe, expect, it } from 'vitest';
import type { Pack } from '#shared/course/pack.ts';
import { clockCheck, fromRest, instantOf, journal, type Motion, pulses } from '#tests/unit/pace/drives.ts';
import { act, fold, leg, look, sheetOf, us } from '#tests/unit/pace/folds.ts';
import { pack } from '#tests/unit/pace/packs.ts';

const withRule = (timeStart: 'scheduled' | 'beam' | 'flag', stagedBehindM = 0): Pack => ({
  ...pack,
  event: { ...pack.event, rules: { ...pack.event.rules, timeStart } },
  attempt: { ...pack.attempt, stagedBehindM },
});
const drive = (motion: Motion, until = 120, metresPerPulse = 0.25, hz = 50) => [
  [clockCheck(pack)],
  pulses(motion, { until, metresPerPulse, hz }),
];

describe('before the release', () => {
  it('goes from grid to countdown to held, and the time runs from the scheduled second', () => {
    const still = fromRest(2.5, 40, 1e6);
    const list = journal([clockCheck(pack)], pulses(still, { from: -90, until: 20, hz: 10 }));
    const [grid, countdown, released, held] = look(pack, list, [-15, -5, 2, 6]);
    expect(grid?.phase).toBe('countdown');
    expect(countdown?.toRelease).toBeCloseTo(5, 6);
    expect(countdown).toMatchObject({ phase: 'countdown', elapsed: null, timeError: null, distance: 0 });
    expect(released).toMatchObject({ phase: 'running', elapsed: 2, timeError: 2 });
    expect(held).toMatchObject({ phase: 'held', elapsed: 6, timeError: 6 });
    expect(countdown?.hold).toMatchObject({ kind: 'hold' });
    const early = look(pack, journal([{ ...clockCheck(pack), at: 1_000_000, officialMs: 1_800_000_000_000 - 99_000 } as never]), [-70]);
    expect(early[0]?.phase).toBe('grid');
  });

  it('a new release typed in while held starts the countdown again', () => {
    const still = fromRest(2.5, 40, 210.4);
    const list = journal(...drive(still, 240), [act(8, { type: 'release-set.v1', releaseMs: 1_800_000_210_000 })]);
    const [held, again, gone] = look(pack, list, [7, 170, 239]);
    expect(held?.phase).toBe('held');
    expect(again).toMatchObject({ phase: 'countdown', elapsed: null });
    expect(again?.toRelease).toBeCloseTo(40, 6);
    expect(gone?.elapsed).toBeCloseTo(29, 6);
    expect(sheetOf(pack, list).reactionS).toBeCloseTo(0.4, 1);
  });
});

describe('first movement', () => {
  // quarter- and half-metre pulses, a place within the pulse that nobody knows
  it.each([0.05, 0.25, 0.5])('is extrapolated back to rest: pulses of %d m', (metresPerPulse) => {
    for (const part of [0, 0.3, 0.7]) {
      const motion = fromRest(2.5, 40, 0.4);
      const shifted: Motion = { metresAt: (t) => motion.metresAt(t) + part * metresPerPulse };
      const p = { ...pack, wheel: { ...pack.wheel, mmPerPulse: metresPerPulse * 1000 } };
      const sheet = sheetOf(p, journal(...drive(shifted, 8, metresPerPulse, 500)));
      expect(Math.abs((sheet.reactionS as number) - 0.4)).toBeLessThan(0.03);
    }
  });

  it('a shuffle on the grid is no start', () => {
    // 1.5 m forward at −40 s, then the launch
    const launch = fromRest(2.5, 40, 0.4);
    const motion: Motion = { metresAt: (t) => Math.min(1.5, Math.max(0, (t + 40) * 0.5)) + launch.metresAt(t) };
    const list = journal([clockCheck(pack)], pulses(motion, { from: -60, until: 130, hz: 50 }));
    const sheet = sheetOf(pack, list);
    expect(sheet.reactionS).toBeCloseTo(0.4, 1);
    expect(leg(sheet, 'settle').elapsedS).toBeCloseTo(instantOf(launch, 4_000), 1);
  });

  it.each([1, 5])('a car that jumps the start by %d s has a negative reaction and loses no distance', (early) => {
    const motion = fromRest(2.5, 40, -early);
    const sheet = sheetOf(pack, journal(...drive(motion, 130)));
    expect(sheet.reactionS).toBeCloseTo(-early, 1);
    expect(leg(sheet, 'settle').elapsedS).toBeCloseTo(instantOf(motion, 4_000), 1);
  });

  it('a car that rolls through at the release counts from where it was then, and says so', () => {
    const motion: Motion = { metresAt: (t) => Math.max(0, (t + 60) * 20) };
    const sheet = sheetOf(pack, journal([clockCheck(pack)], pulses(motion, { from: -70, until: 230, hz: 20 })));
    expect(leg(sheet, 'settle').elapsedS).toBeCloseTo(200, 1);
    expect(sheet.reactionS).toBeNull();
    expect(sheet.warnings.join()).toContain('not standing at the release');
  });

  it('a stop on the road later is not the start', () => {
    // at 40 m/s until 55 s, then 8 m/s² down to rest at 60 s
    const stop = (t: number): number => fromRest(2.5, 40, 0.4).metresAt(Math.min(t, 60)) - 4 * Math.max(0, Math.min(t, 60) - 55) ** 2;
    const motion: Motion = { metresAt: (t) => stop(t) + fromRest(2.5, 40, 100).metresAt(t) };
    const sheet = sheetOf(pack, journal(...drive(motion, 160)));
    expect(sheet.reactionS).toBeCloseTo(0.4, 1);
    expect(leg(sheet, 'settle').elapsedS).toBeCloseTo(instantOf(motion, 4_000), 1);
  });
});

describe('what starts the time', () => {
  const motion = fromRest(2.5, 40, 0.4);

  it('scheduled: the second itself; the metres behind the line are driven in the time', () => {
    const sheet = sheetOf(withRule('scheduled', 6), journal(...drive(motion, 130)));
    expect(leg(sheet, 'settle').elapsedS).toBeCloseTo(instantOf(motion, 4_006), 1);
  });

  it('distance is negative while staged behind the line', () => {
    const [r] = look(withRule('scheduled', 6), journal(...drive(motion, 10)), [-2]);
    expect(r?.distance).toBe(-6);
  });

  it('beam: the nose on the line', () => {
    const p = withRule('beam', 6);
    const list = journal(...drive(motion, 130));
    const line = instantOf(motion, 6);
    const [before, after] = look(p, list, [line - 0.5, line + 1]);
    expect(before?.elapsed).toBeNull();
    expect(after?.elapsed).toBeCloseTo(1, 1);
    const sheet = sheetOf(p, list);
    expect(leg(sheet, 'settle').elapsedS).toBeCloseTo(instantOf(motion, 4_006) - line, 1);
    expect(leg(sheet, 'settle').plannedS).toBeGreaterThan(0);
  });

  it('beam: the crew’s own mark wins', () => {
    const sheet = sheetOf(withRule('beam', 6), journal(...drive(motion, 130), [act(2, { type: 'start-marked.v1' })]));
    expect(leg(sheet, 'settle').elapsedS).toBeCloseTo(instantOf(motion, 4_006) - 2, 1);
  });

  it('flag: the mark; until it is seen, the release', () => {
    const late = fromRest(2.5, 40, 3.4);
    const list = journal(...drive(late, 140), [act(3.1, { type: 'start-marked.v1' })]);
    const [before, after] = look(withRule('flag'), list, [3, 5]);
    expect(before?.elapsed).toBeCloseTo(3, 6);
    expect(after?.elapsed).toBeCloseTo(1.9, 6);
    const sheet = sheetOf(withRule('flag'), list);
    expect(sheet.reactionS).toBeCloseTo(0.3, 1);
  });

  it('without a release or a clock the run still has its distance once the flag is marked', () => {
    const p: Pack = { ...withRule('flag'), attempt: { ...pack.attempt, releaseMs: null } };
    const sheet = sheetOf(p, journal(pulses(motion, { until: 130 }), [act(0, { type: 'start-marked.v1' })]));
    expect(leg(sheet, 'settle').elapsedS).toBeCloseTo(instantOf(motion, 4_000), 1);
  });
});

describe('typed in on the grid', () => {
  it('moves lines, times and limits; what makes no course is left out and counted', () => {
    const motion = fromRest(2.5, 40, 0.4);
    const list = journal(...drive(motion, 780, 0.25, 20), [
      act(-9, { type: 'target-set.v1', targetTimeMs: 760_000 }),
      act(-8, { type: 'line-moved.v1', checkpoint: 'finish', to: { text: '29.900', unit: 'km' } }),
      act(-7, {
        type: 'limit-set.v1',
        zone: 'new',
        from: { text: '10', unit: 'km' },
        to: { text: '11', unit: 'km' },
        limit: { text: '60', unit: 'km/h' },
      }),
      act(-6, { type: 'staged-set.v1', behindM: 4 }),
      act(-5, { type: 'line-moved.v1', checkpoint: 'finish', to: { text: '0', unit: 'km' } }),
      act(-4, { type: 'target-set.v1', targetTimeMs: -1 }),
    ]);
    const state = fold(pack, list);
    expect(state.ignored).toBe(2);
    const sheet = sheetOf(pack, list);
    expect(sheet.targetTimeS).toBe(760);
    expect(leg(sheet, 'finish').officialM).toBe(29_900);
    expect(sheet.finish?.elapsedS).toBeCloseTo(instantOf(motion, 29_904), 1);
    const [r] = look(pack, list, [260]);
    expect(r?.zone?.limit ?? r?.zoneAhead?.limit).toBeCloseTo(60 / 3.6, 9);
    expect(us(0)).toBe(100_000_000);
  });
});
