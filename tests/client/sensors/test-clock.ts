import { vi } from 'vitest';
import { micros } from '#shared/units.ts';
import { createSessionClock } from '#src/run/clock.ts';

/** Origins as they may be: page and worker count from different starts, the wall from 1970. */
const PAGE_ORIGIN = 5000;
const WORKER_ORIGIN = 123;
const WALL = Date.UTC(2026, 5, 1, 12);

/** The real session clock on made-up device clocks that move with the fake timers. */
export function createTestClock(rate = 1) {
  const start = vi.getMockedSystemTime()?.getTime() ?? 0;
  const passed = (): number => Date.now() - start;
  const mono = (): number => PAGE_ORIGIN + passed();
  return {
    clock: createSessionClock({ rate, from: micros(7_000_000), clocks: { mono, wall: () => WALL + passed() } }),
    workerStamp: (): number => WORKER_ORIGIN + passed(),
    wall: (): number => WALL + passed(),
  };
}
