import { describe, expect, it } from 'vitest';
import { begin } from '#shared/pace/run.ts';
import { runSheet } from '#shared/pace/sheet.ts';
import { planOfPack, profile } from '#src/paddock/plan/pack-plan.ts';
import { sampleHeader } from './sample-header.ts';
import { samplePack } from './sample-pack.ts';

describe('plan of a pack', () => {
  const plan = planOfPack(samplePack);

  it('stands by place in order of distance, own places among the official ones, up to the finish', () => {
    expect(plan.places.map(({ checkpoint }) => checkpoint.id)).toEqual(['start', 'quarry', 'mill', 'barn', 'shrine', 'mast', 'finish']);
  });

  it('ends on zero at exactly the target time', () => {
    const finish = plan.places.at(-1);
    expect(finish?.targetS).toBe(1220);
    expect(finish?.plannedErrorS).toBeCloseTo(0, 6);
  });

  // 61 km at 180 km/h: 16.85 km take 16.85 / 180 h = 337 s.
  it('takes the target time of each place from the class average', () => {
    expect(plan.places.find(({ checkpoint }) => checkpoint.id === 'mill')?.targetS).toBeCloseTo(337, 9);
  });

  it('keeps to every limit, and to the cap less its margin', () => {
    const speeds = profile(plan.schedule, (x) => plan.plan.speedAt(x), 6100);
    const most = (from: number, to: number) => Math.max(...speeds.filter(([x]) => x > from && x < to).map(([, v]) => v * 3.6));
    expect(most(18_200, 19_100)).toBeLessThanOrEqual(120 + 1e-6);
    expect(most(44_500, 44_900)).toBeLessThanOrEqual(90 + 1e-6);
    expect(most(0, 61_000)).toBeLessThanOrEqual(220 * 0.98 + 1e-6);
  });

  // To the solver's own tolerance of 1e-7 s.
  it('is what the run sheet of the same pack holds against the run', () => {
    const sheet = runSheet(begin(samplePack), sampleHeader);
    for (const { checkpoint, plannedErrorS } of plan.places.slice(1)) {
      expect(sheet.legs.find((leg) => leg.checkpointId === checkpoint.id)?.plannedS).toBeCloseTo(plannedErrorS, 6);
    }
  });
});
