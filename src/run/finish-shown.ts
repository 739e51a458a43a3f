import type { NewObservation } from '#shared/journal/observation.ts';
import type { Readout } from '#shared/pace/readout.ts';
import { ENGINE_VERSION, type RunState } from '#shared/pace/run.ts';

/** What the cockpit shows at the finish, journalled once, so that a later engine's difference is seen and not hidden. */
export function finishShown(state: RunState, shown: Readout, at: number): NewObservation | null {
  if (shown.finish === null || shown.phase !== 'finished' || state.acts.finishShown !== null) return null;
  const { elapsed, timeError, sigma } = shown.finish;
  const ms = (seconds: number): number => Math.round(seconds * 1e6) / 1e3;
  return { type: 'finish-shown.v1', at, engine: ENGINE_VERSION, elapsedMs: ms(elapsed), timeErrorMs: ms(timeError), sigmaMs: ms(sigma) };
}
