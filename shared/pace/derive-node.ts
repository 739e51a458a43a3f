import type { Estimate } from '#shared/pace/belief.ts';
import { distanceOf } from '#shared/pace/distance.ts';
import { estimateAtNode, firstNodeAfter } from '#shared/pace/estimate-nodes.ts';
import { modelOf, type RunState } from '#shared/pace/run-state.ts';
import { knotAt } from '#shared/pace/track.ts';

/**
 * New comparisons with GNSS at the end of what was derived. Most of them only add an anchor: what a whole derivation would add,
 * without one. False where anything else may change, so that all must be derived anew.
 */
export function appendNodes(state: RunState): boolean {
  const { derived, odometer } = state;
  const last = derived.anchors[derived.anchors.length - 1];
  if (last === undefined || last.belief === null) return true;
  const { sourceNodes } = odometer;
  const from = firstNodeAfter(sourceNodes, last.at);
  const anchors: Estimate[] = [];
  let estimate = last as Estimate;
  for (let i = from; i < sourceNodes.length; i++) {
    estimate = estimateAtNode(state, estimate, derived.placedAt, i);
    anchors.push(estimate);
  }
  const first = anchors[0];
  if (first === undefined) return true;
  if (passesAPlace(state, first.at, anchors)) return false;
  derived.anchors.push(...anchors);
  return true;
}

/** Was a place passed after these instants, or is one passed by them? */
function passesAPlace(state: RunState, since: number, anchors: readonly Estimate[]): boolean {
  const { passings, nextD, startAt, start } = state.derived;
  if (startAt === null && start !== 'standing') return true;
  if (passings.some((p) => p.at !== null && p.at >= since)) return true;
  if (nextD === null) return false;
  const { trace } = state.odometer.track;
  const end = anchors[anchors.length - 1] as Estimate;
  const furthest = Math.max(...anchors.map((a) => a.d), distanceOf(end, knotAt(trace, trace.at.length - 1)));
  return furthest >= nextD || firstUnpassed(state) < furthest;
}

function firstUnpassed(state: RunState): number {
  const i = state.derived.passings.findIndex((p) => p.by === null);
  return i < 0 ? Number.POSITIVE_INFINITY : (modelOf(state).places[i] as { d: number }).d;
}
