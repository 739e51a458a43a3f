import { rememberBand } from '#shared/pace/band.ts';
import { type LivePlan, planLive } from '#shared/pace/plan-live.ts';
import type { PlannedStretch } from '#shared/pace/plan-profile.ts';
import { reviewPlan } from '#shared/pace/plan-review.ts';
import type { HoldMemory, RunState } from '#shared/pace/run-state.ts';
import { shownSpeed } from '#shared/pace/shown-speed.ts';
import { type Situation, situationAt } from '#shared/pace/situation.ts';

/** The speed to hold: solved anew from the present state once a second, shown in the crew's steps and not too often. */

const ADVISE_US = 1_000_000;
/** Two changes of the shown speed are this far apart, but for a change of zone. */
const APART_US = 10_000_000;
/** The last seconds before the finish leave the speed alone. */
const FROZEN_S = 8;
/** The switch to a slower zone's speed comes this long before braking must begin. */
const LEAD_S = 2;
/** Less than this is not worth a warning. */
const TRIFLE_S = 0.05;

/** At most once a second of session time, driven by whatever happens. */
export function isAdviceDue(state: RunState): boolean {
  const { advisedAt } = state.shown;
  return advisedAt === null || state.now - advisedAt >= ADVISE_US;
}

/** Part of the fold: brings the shown hold speed, and what the displays remember, up to date. */
export function advise(state: RunState): void {
  const { shown, now } = state;
  shown.advisedAt = now;
  const s = situationAt(state, now);
  rememberBand(state, s);
  if (s.phase !== 'running') shown.plan.noReturn = null;
  if (s.phase !== 'running' && s.phase !== 'countdown' && s.phase !== 'grid' && s.phase !== 'held') shown.hold = null;
  else if (state.acts.escort || s.distance >= s.model.finish) shown.hold = null;
  else {
    shown.hold = nextHold(shown.hold, freshHold(state, s), s);
    if (s.phase === 'running') reviewPlan(state, s);
  }
}

function freshHold(state: RunState, s: Situation): HoldMemory {
  const { plan: memory } = state.shown;
  const { model, distance, elapsed } = s;
  const speed = Math.max(0, s.speed ?? 0);
  const waiting = s.phase !== 'running' || elapsed === null;
  const live = waiting ? null : planLive(model.live, distance, speed, elapsed, memory.s);
  memory.s = live?.s ?? null;
  const by: number = live?.by ?? model.plan.by;
  const outcome = live?.outcome ?? model.plan.outcome;
  const stretch = stretchToHold(s, live, speed);
  return {
    kind: outcome === 'on zero' || by < TRIFLE_S ? 'hold' : outcome,
    speed: shownSpeed(stretch.hold, stretch.top, stretch.floor, state.pack.settings.speedUnit),
    by,
    changedAt: s.at,
    stretch: stretch.to,
    frozen: false,
  };
}

/** The stretch the car is in, or the slower one it must soon brake for. */
function stretchToHold({ model, distance }: Situation, live: LivePlan | null, speed: number): PlannedStretch {
  const here = live?.here ?? model.plan.stretchAt(distance);
  const { brakingFrom } = here;
  const brakes = brakingFrom !== null && distance + LEAD_S * speed >= brakingFrom && here.to < model.finish;
  if (!brakes) return here;
  return live === null ? model.plan.stretchAt(here.to) : (live.next ?? here);
}

/** What stays of the shown speed, and what may change. One of the two, written over. */
function nextHold(before: HoldMemory | null, fresh: HoldMemory, s: Situation): HoldMemory {
  if (before === null) return fresh;
  const toGo = (s.model.finish - s.distance) / Math.max(1, s.speed ?? 0);
  if (s.phase === 'running' && toGo <= FROZEN_S) {
    before.frozen = true;
    return before;
  }
  if (fresh.stretch !== before.stretch || fresh.speed === before.speed) {
    if (fresh.speed === before.speed) fresh.changedAt = before.changedAt;
    return fresh;
  }
  if (s.at - before.changedAt >= APART_US) return fresh;
  before.kind = fresh.kind;
  before.by = fresh.by;
  return before;
}
