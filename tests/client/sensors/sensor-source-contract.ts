import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import type { NewObservation } from '#shared/journal/observation.ts';
import type { SensorClock } from '#src/sensors/sensor-clock.ts';
import type { SensorListener, SensorSource, SensorStatus } from '#src/sensors/sensor-source.ts';

/** One implementation under test with its scripted outside. */
export interface SourceUnderTest {
  readonly source: SensorSource;
  readonly clock: SensorClock;
  /** Makes the outside go on for so many ms of fake time, with whatever it sends. */
  run(ms: number): Promise<void>;
  /** Permission is there already, so that `ask` is not needed. */
  readonly granted: boolean;
  /** The outside falls silent and stays connected, or speaks again; null where it cannot. */
  readonly silence: ((quiet: boolean) => void) | null;
}

export interface SourceCase {
  readonly name: SensorSource['name'];
  make(options: { readonly granted: boolean }): SourceUnderTest;
  /** A source on a device that lacks what it needs; null where nothing can be missing. */
  readonly unsupported: (() => SensorSource) | null;
  /** A source whose permission the person refuses; null where nobody is asked. */
  readonly refused: (() => SensorSource) | null;
}

export function recordingListener() {
  const observations: NewObservation[] = [];
  const statuses: SensorStatus[] = [];
  const listener: SensorListener = {
    observed: (list) => void observations.push(...list),
    status: (status) => void statuses.push(status),
  };
  return { listener, observations, statuses, last: (): SensorStatus | undefined => statuses.at(-1) };
}

/** What every sensor source promises, whatever it is made of. */
export function sensorSourceContract({ name, make, unsupported, refused }: SourceCase): void {
  describe(`sensor source contract: ${name}`, () => {
    beforeEach(() => void vi.useFakeTimers({ now: Date.UTC(2026, 0, 1) }));
    afterEach(() => void vi.useRealTimers());

    it('is named, delivers once open, and says that it is live', async () => {
      const { source, run } = make({ granted: true });
      const heard = recordingListener();
      expect(source.name).toBe(name);
      expect(await source.open(heard.listener, { ask: true })).toEqual({ ok: true, value: undefined });
      await run(3000);
      expect(heard.observations.length).toBeGreaterThan(0);
      expect(heard.last()).toMatchObject({ state: 'live', failure: null });
      expect(heard.last()?.goodLines).toBeGreaterThan(0);
      await source.close();
    });

    it('stamps each observation with an instant of the session clock: whole microseconds, not ahead, at most 2 s behind', async () => {
      const { source, run, clock } = make({ granted: true });
      const stamps: { at: number; now: number }[] = [];
      await source.open(
        { observed: (list) => list.forEach((o) => void stamps.push({ at: o.at, now: clock.now() })), status: () => undefined },
        { ask: true },
      );
      await run(3000);
      expect(stamps.length).toBeGreaterThan(0);
      for (const { at, now } of stamps) {
        expect(Number.isInteger(at)).toBe(true);
        expect(at).toBeLessThanOrEqual(now);
        expect(now - at).toBeLessThanOrEqual(2_000_000);
      }
      await source.close();
    });

    it('gives no seq: that is the run session’s', async () => {
      const { source, run } = make({ granted: true });
      const heard = recordingListener();
      await source.open(heard.listener, { ask: true });
      await run(1500);
      expect(heard.observations.filter((o) => 'seq' in o)).toEqual([]);
      await source.close();
    });

    it('delivers nothing after close, says that it is closed, and can be opened again', async () => {
      const { source, run } = make({ granted: true });
      const first = recordingListener();
      await source.open(first.listener, { ask: true });
      await run(1500);
      await source.close();
      const count = first.observations.length;
      expect(first.last()?.state).toBe('closed');
      await run(3000);
      expect(first.observations).toHaveLength(count);
      expect(first.last()?.state).toBe('closed');
      const second = recordingListener();
      expect((await source.open(second.listener, { ask: false })).ok).toBe(true);
      await run(1500);
      expect(second.observations.length).toBeGreaterThan(0);
      expect(first.observations).toHaveLength(count);
      await source.close();
    });

    it('opened again while open serves the new listener only', async () => {
      const { source, run } = make({ granted: true });
      const [first, second] = [recordingListener(), recordingListener()];
      await source.open(first.listener, { ask: true });
      await run(1000);
      await source.open(second.listener, { ask: false });
      const count = first.observations.length;
      await run(1500);
      expect(first.observations).toHaveLength(count);
      expect(second.observations.length).toBeGreaterThan(0);
      await source.close();
    });

    it('may be closed twice, or before it was opened', async () => {
      const { source } = make({ granted: true });
      await source.close();
      await source.open(recordingListener().listener, { ask: true });
      await source.close();
      await source.close();
    });

    it('says when it falls silent, and when it is back', async () => {
      const { source, run, silence } = make({ granted: true });
      if (silence === null) return;
      const heard = recordingListener();
      await source.open(heard.listener, { ask: true });
      await run(1500);
      silence(true);
      await run(6000);
      expect(heard.last()?.state).toBe('silent');
      silence(false);
      await run(1500);
      expect(heard.last()?.state).toBe('live');
      await source.close();
    });

    it('without permission asks nobody unless told to', async () => {
      const { source, granted } = make({ granted: false });
      if (granted) return;
      const answer = await source.open(recordingListener().listener, { ask: false });
      expect(answer).toMatchObject({ ok: false, error: { code: 'none-chosen' } });
    });

    it('answers a missing device or a refusal with a code and a sentence', async () => {
      for (const [source, codes] of [
        [unsupported?.(), ['unsupported']],
        [refused?.(), ['none-chosen', 'denied']],
      ] as const) {
        if (source === undefined) continue;
        const answer = await source.open(recordingListener().listener, { ask: true });
        if (answer.ok) expect.fail('opened all the same');
        expect(codes).toContain(answer.error.code);
        expect(answer.error.message).toMatch(/^[A-Z].{20,}\.$/);
        await source.close();
      }
    });
  });
}
