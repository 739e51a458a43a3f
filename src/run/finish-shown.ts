import type { NewObservation } from '#shared/journal/observation.ts';
import { ENGINE_VERSION, type RunState, readout } from '#shared/pace/run.ts';
import type { Micros } from '#shared/units.ts';

/** What the cockpit shows at the finish, once, so that a later engine's difference is seen and not hidden; else nothing. */
export function finishShown(state: RunState, at: Micros): NewObservation[] {
  if (state.acts.finishShown !== null) return [];
  const { finish, phase } = readout(state, at);
  if (finish === null || phase !== 'finished') return [];
  const ms = (seconds: number): number => Math.round(seconds * 1e6) / 1e3;
  return [
    {
      type: 'finish-shown.v1',
      at,
      engine: ENGINE_VERSION,
      elapsedMs: ms(finish.elapsed),
      timeErrorMs: ms(finish.timeError),
      sigmaMs: ms(finish.sigma),
    },
  ];
}
