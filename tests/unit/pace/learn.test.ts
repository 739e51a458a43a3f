import { describe, expect, it } from 'vitest';
import { createRandom } from '#shared/drive/random.ts';
import { type Leads, learnLeadFromFinish, learnLeadFromTouches, type TimedTouch } from '#shared/pace/learn-lead.ts';
import { learnScatter, type Scatter, type TapFigures, tapFigures, UNLEARNT_SCATTER } from '#shared/pace/learn-taps.ts';
import { clockCheck, fromRest, instantOf, journal, pulses, tapAt } from '#tests/unit/pace/drives.ts';
import { sheetOf } from '#tests/unit/pace/folds.ts';
import { driveEvent, type Hand } from '#tests/unit/pace/navigators.ts';
import { pack } from '#tests/unit/pace/packs.ts';
import { byRule } from '#tests/unit/pace/rules.ts';

/** What is learnt of navigators: against closed forms, and against navigators whose habits are known because they are made up. */

const PRIOR: Leads = { glass: { leadMs: 200, sigmaMs: 50 }, wired: { leadMs: 0, sigmaMs: 100 } };
const GLASS = { glass: 1, wired: 0 };
const finish = (leads: Leads, ownMs: number, sigmaMs = 180) => ({
  ownMs,
  officialMs: 0,
  sigmaMs,
  share: GLASS,
  inForceMs: { glass: leads.glass.leadMs, wired: leads.wired.leadMs },
});

describe('lead from the finish', () => {
  it('0.05 s against 0.18 s: a gain of 0.07, falling with every event as the closed form says', () => {
    let leads = PRIOR;
    for (let n = 1; n <= 8; n++) {
      const before = leads;
      leads = learnLeadFromFinish(before, finish(before, 100)).leads;
      const known = 1 / (1 / 50 ** 2 + n / 180 ** 2);
      expect(leads.glass.sigmaMs).toBeCloseTo(Math.sqrt(known), 9);
      expect((leads.glass.leadMs - before.glass.leadMs) / 100).toBeCloseTo(known / 180 ** 2, 9);
      if (n === 1) expect(leads.glass.leadMs - 200).toBeCloseTo(100 * 0.0716, 2);
    }
    expect(leads.wired).toEqual(PRIOR.wired);
  });

  it('finishing later than the officials say means that touches come later than thought, and a second run with the old pack counts once', () => {
    const first = learnLeadFromFinish(PRIOR, finish(PRIOR, 90));
    expect(first.leads.glass.leadMs).toBeGreaterThan(200);
    expect(first.sentence).toBe('Touches on glass come 0.21 s late ±0.10 s, wired on the place ±0.20 s, by the official finish.');
    // both runs were driven with 200 ms in force: together they are one observation of 90 ms with half the variance
    const both = learnLeadFromFinish(first.leads, finish(PRIOR, 90)).leads.glass;
    const once = learnLeadFromFinish(PRIOR, finish(PRIOR, 90, 180 / Math.SQRT2)).leads.glass;
    expect(both.leadMs).toBeCloseTo(once.leadMs, 9);
    expect(both.sigmaMs).toBeCloseTo(once.sigmaMs, 9);
  });

  it('two inputs share the lesson by how little each was known', () => {
    const { leads } = learnLeadFromFinish(PRIOR, { ...finish(PRIOR, 100), share: { glass: 0.5, wired: 0.5 } });
    // gains ½·50² and ½·100² over ¼·50² + ¼·100² + 180²
    expect(leads.glass.leadMs - 200).toBeCloseTo((100 * 1250) / 35_525, 9);
    expect(leads.wired.leadMs).toBeCloseTo((100 * 5000) / 35_525, 9);
  });

  it('a finish seconds away teaches nothing', () => {
    const lesson = learnLeadFromFinish(PRIOR, finish(PRIOR, 3_000));
    expect(lesson).toMatchObject({ learnt: false, leads: PRIOR });
    expect(lesson.sentence).toBe(
      'Leads kept: the official finish is 3.00 s off, more than a habit explains. Look for a wrong time or a mistaken tap.',
    );
  });
});

describe('lead from touches at timed places', () => {
  const touch = (late: number, over: Partial<TimedTouch> = {}): TimedTouch => ({
    input: 'wired',
    touchMs: 1_800_000_000_000 + late,
    officialMs: 1_800_000_000_000,
    seatM: 2,
    speed: 50,
    scatterMs: 100,
    sigmaMs: 0.001,
    ...over,
  });

  it('is the mean of touch less passing of the eye, weighted with what was known', () => {
    // the eye passes 2 m later: 40 ms at 50 m/s
    const { leads, sentence } = learnLeadFromTouches(PRIOR, [touch(140), touch(200), touch(80)]);
    expect(leads.wired.leadMs).toBeCloseTo((100 + 160 + 40 + 0) / 4, 6);
    expect(leads.wired.sigmaMs).toBeCloseTo(50, 6);
    expect(leads.glass).toEqual(PRIOR.glass);
    expect(sentence).toContain('3 of 3 touches');
  });

  it('a touch seconds off, or at a standstill, is left out', () => {
    const odd = learnLeadFromTouches(PRIOR, [touch(140), touch(3_000), touch(140, { speed: 0 })]);
    expect(odd.leads).toEqual(learnLeadFromTouches(PRIOR, [touch(140)]).leads);
    expect(odd.sentence).toContain('1 of 3 touches');
  });
});

const EVENTS = 8;

/** 300 navigators over eight events, everything learnt carried on to the next. */
function careers() {
  const random = createRandom(7, 'navigators');
  return Array.from({ length: 300 }, (_, n) => {
    const hand: Hand = { leadMs: 200 + random.gauss(50), scatterMs: random.range(50, 200) };
    let leads = PRIOR;
    let scatter: Scatter = UNLEARNT_SCATTER;
    const after = Array.from({ length: EVENTS }, (_, event) => {
      const run = driveEvent(hand, leads, scatter, n * 100 + event);
      leads = learnLeadFromFinish(leads, { ...finish(leads, run.ownMs, run.sigmaMs), officialMs: run.officialMs }).leads;
      scatter = learnScatter(scatter, run.taps, 'glass').scatter;
      return { leads, scatter };
    });
    return { hand, after };
  });
}
const rms = (list: readonly number[]): number => Math.sqrt(list.reduce((sum, x) => sum + x * x, 0) / list.length);

describe('300 navigators with leads of 0.20 ± 0.05 s and scatters of 0.05 to 0.20 s, over eight events', () => {
  const all = careers();

  it('the error of the learnt lead falls as its stated sigma says, which covers 93 to 98 % at two', () => {
    let inside = 0;
    let before = 50;
    for (let event = 0; event < EVENTS; event++) {
      const rows = all.map(({ hand, after }) => ({
        error: (after[event]?.leads.glass.leadMs as number) - hand.leadMs,
        sigma: after[event]?.leads.glass.sigmaMs as number,
      }));
      const [found, stated] = [rms(rows.map((r) => r.error)), rms(rows.map((r) => r.sigma))];
      // three sigmas of an RMS over 300
      expect(Math.abs(found / stated - 1), `after ${event + 1}: ${found} against ${stated}`).toBeLessThan(3 / Math.sqrt(600));
      expect(stated).toBeLessThan(before);
      before = stated;
      inside += rows.filter((r) => Math.abs(r.error) <= 2 * r.sigma).length;
    }
    const covered = inside / (300 * EVENTS);
    expect(covered).toBeGreaterThan(0.93);
    expect(covered).toBeLessThan(0.98);
  });

  it('the scatter comes out right on average, and closer with every event', () => {
    const ratios = (event: number) => all.map(({ hand, after }) => (after[event]?.scatter.scatterMs as number) / hand.scatterMs);
    const spread = (event: number) => rms(ratios(event).map((r) => Math.log(r)));
    const told = rms(all.map(({ hand }) => Math.log(UNLEARNT_SCATTER.scatterMs / hand.scatterMs)));
    expect(spread(0)).toBeLessThan(told);
    expect(spread(7)).toBeLessThan(spread(1));
    // places 15 km apart leave little of a misfit to the hand: a third nearer after eight events
    expect(spread(7)).toBeLessThan(0.7 * told);
    const squares = all.reduce((sum, { hand, after }) => sum + ((after[7]?.scatter.scatterMs as number) / hand.scatterMs) ** 2, 0) / 300;
    expect(Math.abs(squares - 1)).toBeLessThan(0.12);
  });
});

describe('scatter', () => {
  const tap = (misfitM: number, over: Partial<TapFigures> = {}): TapFigures => ({
    input: 'glass',
    verdict: 'used',
    misfitM,
    varianceM2: 0,
    surveySigmaM: 0,
    speed: 50,
    ...over,
  });

  it('by hand: ten taps’ worth at 0.10 s and two clean ones at 0.20 s', () => {
    // 10 m at 50 m/s is 0.2 s: (10·0.01 + 2·0.04)/12
    const { scatter, sentence } = learnScatter(UNLEARNT_SCATTER, [tap(10), tap(-10)], 'glass');
    expect(scatter.scatterMs).toBeCloseTo(Math.sqrt(0.18 / 12) * 1000, 9);
    expect(scatter.taps).toBeCloseTo(12, 9);
    expect(sentence).toBe('Touches on glass spread by 0.12 s, known to about 20 %, with 2 taps of this run.');
  });

  it('what distance and survey explain is not the hand’s; a tap blurred by them weighs little', () => {
    // survey 3 m, distance 4 m, hand 5 m: weight (25/50)², and 50 m² of misfit are just what was expected
    const { scatter } = learnScatter(UNLEARNT_SCATTER, [tap(Math.sqrt(50), { varianceM2: 16, surveySigmaM: 3 })], 'glass');
    expect(scatter.scatterMs).toBeCloseTo(100, 9);
    expect(scatter.taps).toBeCloseTo(10.25, 9);
  });

  it('mistaken and voided taps, other inputs and crawling teach nothing; one wild tap counts as three sigmas', () => {
    const odd = [tap(150, { verdict: 'doubted' }), tap(10, { verdict: 'voided' }), tap(10, { input: 'wired' }), tap(1, { speed: 1 })];
    const lesson = learnScatter(UNLEARNT_SCATTER, odd, 'glass');
    expect(lesson).toMatchObject({ scatter: UNLEARNT_SCATTER, used: 0, left: 2 });
    const [wild, three] = [500, 15].map((m) => learnScatter(UNLEARNT_SCATTER, [tap(m)], 'glass').scatter.scatterMs) as [number, number];
    expect(wild).toBeCloseTo(three, 9);
  });

  it('a run with one mistaken tap leaves the scatter nearly as it would be without', () => {
    const hand = { leadMs: 200, scatterMs: 100 };
    const of = (mistakenAt: number) => {
      let scatter: Scatter = UNLEARNT_SCATTER;
      for (let n = 0; n < 20; n++)
        scatter = learnScatter(scatter, driveEvent(hand, PRIOR, scatter, 900 + n, mistakenAt).taps, 'glass').scatter;
      return scatter.scatterMs;
    };
    expect(Math.abs(of(4) / of(-1) - 1)).toBeLessThan(0.2);
  });

  it('reads a run sheet: three scattered touches of a run, one of them mistaken', () => {
    const motion = fromRest(2.5, 41, 0.4);
    const sensors = pulses(motion, { until: 740, hz: 20, metresPerPulse: 0.2507 });
    const touches = [tapAt(instantOf(motion, 4_000) + 0.13), tapAt(instantOf(motion, 12_000) + 4), tapAt(instantOf(motion, 24_000) - 0.08)];
    const sheet = sheetOf(byRule('estimator'), journal([clockCheck(pack)], sensors, touches));
    const taps = tapFigures(sheet.taps);
    expect(taps.map((t) => t.verdict)).toEqual(['used', 'doubted', 'used']);
    expect(learnScatter(UNLEARNT_SCATTER, taps, 'glass')).toMatchObject({ used: 2, left: 1 });
    for (const t of taps) expect(Math.abs(t.speed - 41)).toBeLessThan(0.5);
  });
});
