import type { Estimate } from '#shared/pace/belief.ts';
import { lossVariance } from '#shared/pace/distance.ts';
import { compareAt } from '#shared/pace/estimator.ts';
import type { RunState } from '#shared/pace/run-state.ts';
import type { SourceNode } from '#shared/pace/source-node.ts';

/** What the comparisons with GNSS make of an estimate between two taps. */

/** Index of the first node after an instant. */
export function firstNodeAfter(nodes: readonly SourceNode[], at: number): number {
  let i = nodes.length;
  while (i > 0 && (nodes[i - 1] as SourceNode).at > at) i--;
  return i;
}

/** The estimates at every node after the last one up to an instant. `placedAt`: instant of the last tap taken in, or of the start. */
export function estimatesTo(state: RunState, last: Estimate, placedAt: number, until: number): Estimate[] {
  const { sourceNodes: nodes } = state.odometer;
  const estimates: Estimate[] = [];
  let estimate = last;
  for (let i = firstNodeAfter(nodes, last.at); i < nodes.length && (nodes[i] as SourceNode).at <= until; i++) {
    estimate = estimateAtNode(state, estimate, placedAt, i);
    estimates.push(estimate);
  }
  return estimates;
}

export function estimateAtNode(state: RunState, last: Estimate, placedAt: number, i: number): Estimate {
  const { sourceNodes: nodes, losses } = state.odometer;
  const node = nodes[i] as SourceNode;
  return compareAt(last, nodes[i - 1] ?? null, node, placedAt, lossVariance(losses, last.at, node.at));
}
