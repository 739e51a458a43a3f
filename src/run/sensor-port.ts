import type { NewObservation, SensorName } from '#shared/journal/observation.ts';
import type { Result } from '#shared/result.ts';
import type { SensorFailure, SensorListener, SensorSource, SensorStatus } from '#src/sensors/sensor-source.ts';
import type { RunStatus } from './run-session-contract.ts';

/** The one sensor source of a run: what it sees goes on as it comes, and that it was gained or lost is an observation too. */
export interface SensorPort {
  attach(source: SensorSource, options: { readonly ask: boolean }): Promise<Result<void, SensorFailure>>;
  detach(): Promise<void>;
  status(): RunStatus['sensor'];
}

interface PortOptions {
  readonly observed: (observations: readonly NewObservation[]) => void;
  readonly now: () => number;
  readonly changed: () => void;
}

export function createSensorPort({ observed, now, changed }: PortOptions): SensorPort {
  let source: SensorSource | null = null;
  let status: SensorStatus | null = null;
  let alive = false;

  const say = (name: SensorName, nowAlive: boolean, detail: string): void => {
    if (alive === nowAlive) return;
    alive = nowAlive;
    observed([{ type: alive ? 'sensor-gained.v1' : 'sensor-lost.v1', at: now(), sensor: name, detail }]);
  };
  const listenerFor = (mine: SensorSource): SensorListener => ({
    observed: (observations) => {
      if (source !== mine) return;
      // what it says must not be taken for another sensor's: the journal names it first
      say(mine.name, true, status === null ? 'heard' : counts(status));
      observed(observations);
    },
    status: (next) => {
      if (source !== mine) return;
      status = next;
      if (next.state === 'live') say(mine.name, true, counts(next));
      else if (next.state !== 'opening') say(mine.name, false, `${next.state}; ${next.failure?.code ?? counts(next)}`);
      changed();
    },
  });
  const detach = async (): Promise<void> => {
    const leaving = source;
    if (leaving === null) return;
    source = null;
    status = null;
    say(leaving.name, false, 'detached');
    await leaving.close();
    changed();
  };
  return {
    detach,
    status: () => (source === null || status === null ? null : { ...status, name: source.name }),
    async attach(next, options) {
      await detach();
      source = next;
      const opened = await next.open(listenerFor(next), options);
      if (!opened.ok && source === next) {
        status = { state: 'lost', goodLines: 0, garbledLines: 0, failure: opened.error };
        changed();
      }
      return opened;
    },
  };
}

const counts = ({ goodLines, garbledLines }: SensorStatus): string => `${goodLines} good lines, ${garbledLines} garbled`;
