import { makePlan, type PlanRequest } from '#shared/pace/plan.ts';
import { type LivePlan, makeLivePlanner, planLive } from '#shared/pace/plan-live.ts';
import { planPieces } from '#shared/pace/plan-pieces.ts';
import { metres, metresPerSecond, seconds } from '#shared/units.ts';

const LENGTH = 120_000;
const AVERAGE = 50;
const ZONES = 50;

const request: PlanRequest = {
  schedule: {
    start: metres(0),
    finish: metres(LENGTH),
    targetTime: seconds(LENGTH / AVERAGE),
    difference: seconds(0),
    sections: [{ from: metres(0), to: metres(LENGTH), begins: seconds(0), speed: metresPerSecond(AVERAGE), neutral: false }],
  },
  zones: Array.from({ length: ZONES }, (_, i) => ({ from: 6_000 + i * 2_200, to: 6_300 + i * 2_200, limit: 30 + ((i * 7) % 15) })),
  top: 58,
  floor: null,
  acceleration: 2.5,
  deceleration: 4,
  from: { x: 0, v: 0, t: 0 },
  mode: 'finish',
};

/**
 * A drive planned anew every second, with fifty zones still ahead at every one of them, one second's s the next one's beginning.
 * Microseconds a plan, the least of the rounds.
 */
export function replanMicroseconds(rounds: number): number {
  const pieces = planPieces(request);
  const planner = makeLivePlanner(request, pieces);
  const plan = makePlan(request, pieces);
  const states = Array.from({ length: 100 }, (_, i) => {
    const x = 500 + i * 50;
    return { x, v: plan.speedAt(x) + Math.sin(i), t: plan.timeAt(x) + Math.sin(i / 3) };
  });
  let best = Number.POSITIVE_INFINITY;
  for (let round = 0; round < rounds; round++) {
    const begun = performance.now();
    let s: number | null = plan.s;
    for (const { x, v, t } of states) {
      const live: LivePlan | null = planLive(planner, x, v, t, s);
      if (live === null || live.outcome !== 'on zero') throw new Error('the plan should end on zero');
      s = live.s;
    }
    best = Math.min(best, ((performance.now() - begun) * 1000) / states.length);
  }
  return best;
}
