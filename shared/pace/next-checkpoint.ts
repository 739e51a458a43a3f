import { reachOf } from '#shared/pace/derive-tap.ts';
import { planInForce } from '#shared/pace/plan-memory.ts';
import type { NextCheckpoint } from '#shared/pace/readout.ts';
import type { PlacePassing, RunState } from '#shared/pace/run-state.ts';
import type { Situation } from '#shared/pace/situation.ts';
import { metres, seconds } from '#shared/units.ts';

/** Which place the button is for. */

/** The button begins to fill this long before the place, within these bounds in metres. */
const FILLS_FOR_S = 20;
const FILLS_LEAST_M = 200;
const FILLS_MOST_M = 1000;
/** Below this an arrival cannot be told, m/s. */
const TOO_SLOW = 1;

/**
 * The first place neither touched nor skipped. A missed place stays on offer while a late touch would still belong to it: within
 * its reach, and nearer than the next. The finish does not: it is passed by itself.
 */
export function nextIndex(state: RunState, s: Situation): number | null {
  const { places } = s.model;
  const reach = reachOf(s.variance);
  for (let i = 0; i < places.length; i++) {
    const place = places[i] as (typeof places)[number];
    const passing: PlacePassing | undefined = state.derived.passings[i];
    if (passing?.by === 'tap' || state.acts.skipped.includes(place.checkpoint.id)) continue;
    if (passing === undefined || passing.at === null || passing.at > s.at) return i;
    const following = places[i + 1]?.d ?? Number.POSITIVE_INFINITY;
    const offered = Math.min(place.d + reach, (place.d + following) / 2);
    if (place.checkpoint.duty !== 'finish' && place.checkpoint.duty !== 'stop board' && s.distance < offered) return i;
  }
  return null;
}

export function nextCheckpoint(state: RunState, s: Situation): NextCheckpoint | null {
  if (s.phase === 'ended') return null;
  const index = nextIndex(state, s);
  const place = index === null ? undefined : s.model.places[index];
  if (index === null || place === undefined) return null;
  const toGo = place.d - s.distance;
  const speed = s.speed ?? 0;
  const fills = Math.min(FILLS_MOST_M, Math.max(FILLS_LEAST_M, FILLS_FOR_S * speed));
  return {
    checkpoint: place.checkpoint,
    at: metres(place.d),
    index: index + 1,
    of: s.model.places.length,
    toGo: metres(toGo),
    eta: speed > TOO_SLOW ? seconds(toGo / speed) : null,
    planned: seconds(place.d >= s.model.finish ? 0 : planInForce(state, s.model).plannedErrorAt(place.d)),
    nearness: Math.min(1, Math.max(0, 1 - Math.abs(toGo) / fills)),
    inReach: state.derived.anchors.length > 0 && Math.abs(toGo) <= reachOf(s.variance),
  };
}
