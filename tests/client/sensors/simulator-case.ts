import { vi } from 'vitest';
import { createSimulatorSource, type SimulatorSourceDeps } from '#src/sensors/simulator-source.ts';
import type { SourceCase } from '#tests/client/sensors/sensor-source-contract.ts';
import { createTestClock } from '#tests/client/sensors/test-clock.ts';
import { SHORT_PACK } from '#tests/unit/drive/base-pack.ts';

export function makeSimulator(options: {
  readonly granted: boolean;
  readonly rate?: number;
  readonly deps?: Partial<SimulatorSourceDeps>;
}) {
  const { clock } = createTestClock(options.rate);
  const source = createSimulatorSource({ clock, pack: SHORT_PACK, seed: 5, ...options.deps });
  return {
    source,
    clock,
    run: async (ms: number): Promise<void> => void (await vi.advanceTimersByTimeAsync(ms)),
    // Nobody is asked for a simulator.
    granted: true,
    silence: null,
  };
}

export const SIMULATOR_CASE: SourceCase = { name: 'simulator', make: makeSimulator, unsupported: null, refused: null };
