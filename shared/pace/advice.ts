import { rememberBand } from '#shared/pace/band.ts';
import { makePlan, type Plan, piecesFrom } from '#shared/pace/plan.ts';
import type { HoldMemory, RunState } from '#shared/pace/run-state.ts';
import { type Situation, situationAt } from '#shared/pace/situation.ts';
import { metresPerSecondPer, type SpeedUnit } from '#shared/units.ts';

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

/** Steps of the shown speed: 2 km/h or 1 mph. */
const stepOf = (unit: SpeedUnit): number => (unit === 'km/h' ? 2 : 1);

/**
 * A speed in the crew's steps, never above `upper`, never below `lower` (upper wins). Where a bound itself is the advice, it is
 * shown to the whole unit instead of the step.
 */
export function shownSpeed(wanted: number, upper: number, lower: number, unit: SpeedUnit): number {
  const per = metresPerSecondPer(unit);
  const step = stepOf(unit);
  const dust = 1e-6;
  const most = Math.floor(upper / per + dust);
  let shown = Math.round(wanted / per / step) * step;
  if (wanted >= upper - dust) shown = most;
  else if (shown > most) shown = Math.floor(upper / per / step + dust) * step;
  if (shown < lower / per - dust) shown = Math.min(most, Math.ceil(lower / per - dust));
  return shown * per;
}

/** At most once a second of session time, driven by whatever happens. */
export function isAdviceDue(state: RunState): boolean {
  const { advisedAt } = state.shown;
  return advisedAt === null || state.now - advisedAt >= ADVISE_US;
}

/** Part of the fold: brings the shown hold speed, and what the band remembers, up to date. */
export function advise(state: RunState): void {
  const { shown, now } = state;
  shown.advisedAt = now;
  const s = situationAt(state, now);
  rememberBand(state, s);
  if (s.phase !== 'running' && s.phase !== 'countdown' && s.phase !== 'grid' && s.phase !== 'held') shown.hold = null;
  else if (state.acts.escort || s.distance >= s.model.finish) shown.hold = null;
  else shown.hold = nextHold(shown.hold, freshHold(state, s), s);
}

function planFrom({ model, distance, speed }: Situation, t: number): Plan {
  const pieces = piecesFrom(model.pieces, distance);
  return makePlan({ ...model.request, from: { x: distance, v: Math.max(0, speed ?? 0), t } }, pieces);
}

function freshHold(state: RunState, s: Situation): HoldMemory {
  const waiting = s.phase !== 'running' || s.elapsed === null;
  const plan: Plan = waiting ? s.model.plan : planFrom(s, s.elapsed);
  let stretch = plan.stretchAt(s.distance);
  const { brakingFrom } = stretch;
  const ahead = s.distance + LEAD_S * (s.speed ?? 0);
  if (brakingFrom !== null && ahead >= brakingFrom && stretch.to < s.model.finish) stretch = plan.stretchAt(stretch.to);
  const unit = state.pack.settings.speedUnit;
  const by: number = plan.by;
  return {
    kind: plan.outcome === 'on zero' || by < TRIFLE_S ? 'hold' : plan.outcome,
    speed: shownSpeed(stretch.hold, stretch.top, s.model.floor ?? 0, unit),
    by,
    changedAt: s.at,
    stretch: stretch.to,
    frozen: false,
  };
}

/** What stays of the shown speed, and what may change. */
function nextHold(before: HoldMemory | null, fresh: HoldMemory, s: Situation): HoldMemory {
  if (before === null) return fresh;
  const toGo = (s.model.finish - s.distance) / Math.max(1, s.speed ?? 0);
  if (s.phase === 'running' && toGo <= FROZEN_S) return { ...before, frozen: true };
  if (fresh.stretch !== before.stretch || fresh.speed === before.speed) {
    return { ...fresh, changedAt: fresh.speed === before.speed ? before.changedAt : fresh.changedAt };
  }
  if (s.at - before.changedAt >= APART_US) return fresh;
  return { ...before, kind: fresh.kind, by: fresh.by };
}
