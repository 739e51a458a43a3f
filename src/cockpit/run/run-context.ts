import { createContext, use } from 'react';
import type { DistanceUnit, SpeedUnit } from '#shared/units.ts';
import type { RunSession } from '#src/run/run-session-contract.ts';

/** What the parts of the run screen share: the session they act on and how figures are printed. */
export interface RunSettings {
  readonly session: RunSession;
  readonly speedUnit: SpeedUnit;
  readonly distanceUnit: DistanceUnit;
  readonly timeZone: string;
}

export const RunContext = createContext<RunSettings | null>(null);

export function useRunSettings(): RunSettings {
  const settings = use(RunContext);
  if (settings === null) throw new Error('the run screen needs a RunContext around it');
  return settings;
}
