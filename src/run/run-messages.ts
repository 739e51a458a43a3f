import type { Journalled } from '#shared/journal/block.ts';
import type { RunStatus } from './run-session-contract.ts';

/** What the windows of one run say to each other. The writer publishes observations; every window folds them for itself. */
export type RunMessage =
  /** A window begins to follow. */
  | { readonly type: 'hello' }
  /** Everything below `committed` is in storage; a gap before the first observation is to be read from there. */
  | { readonly type: 'observed'; readonly observations: readonly Journalled[]; readonly committed: number }
  | { readonly type: 'status'; readonly status: PublishedStatus }
  /** What does the writer's session clock read? */
  | { readonly type: 'ask'; readonly id: string }
  | { readonly type: 'reading'; readonly id: string; readonly at: number };

export type PublishedStatus = Pick<RunStatus, 'sensor' | 'storage'>;

export const channelName = (runId: string): string => `evenline-run:${runId}`;
export const lockName = (runId: string): string => `evenline-run:${runId}`;
