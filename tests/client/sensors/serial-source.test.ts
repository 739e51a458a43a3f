import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import type { NewObservation } from '#shared/journal/observation.ts';
import { writeButton, writeWheel } from '#shared/sensor/sentence-writer.ts';
import { createSerialSource } from '#src/sensors/serial-source.ts';
import { createScriptedSerial, startInProcess } from '#tests/client/sensors/scripted-serial.ts';
import { recordingListener } from '#tests/client/sensors/sensor-source-contract.ts';
import { bytesOf, makeSerial } from '#tests/client/sensors/serial-case.ts';
import { createTestClock } from '#tests/client/sensors/test-clock.ts';

type Pulse = Extract<NewObservation, { type: 'pulse.v1' }>;
const pulses = (list: readonly NewObservation[]): Pulse[] => list.filter((o): o is Pulse => o.type === 'pulse.v1');

/** A source open on a scripted port, with nothing sent yet. */
async function openSerial(rate = 1) {
  const { clock, workerStamp } = createTestClock(rate);
  const serial = createScriptedSerial(true);
  const source = createSerialSource({ clock, serial: serial.page, startWorker: () => startInProcess(serial.worker, workerStamp) });
  const heard = recordingListener();
  expect(await source.open(heard.listener, { ask: false })).toEqual({ ok: true, value: undefined });
  const send = (text: string): void => serial.send({ kind: 'bytes', bytes: bytesOf(text) });
  return { clock, serial, source, send, ...heard };
}

describe('serial source', () => {
  beforeEach(() => void vi.useFakeTimers({ now: Date.UTC(2026, 0, 1) }));
  afterEach(() => void vi.useRealTimers());

  it('opens the port in the worker only, at 115200 baud with a buffer of 256 KiB', async () => {
    const { serial, source } = await openSerial();
    const [inWorker] = await serial.worker.getPorts();
    const [onPage] = await serial.page.getPorts();
    expect(inWorker?.opened).toEqual({ baudRate: 115_200, bufferSize: 262_144 });
    expect(onPage?.opened).toBeNull();
    await source.close();
    expect(inWorker?.opened).toBeNull();
  });

  it('takes another baud rate', async () => {
    const serial = createScriptedSerial(true);
    const { clock, workerStamp } = createTestClock();
    const source = createSerialSource({
      clock,
      serial: serial.page,
      baudRate: 9600,
      startWorker: () => startInProcess(serial.worker, workerStamp),
    });
    await source.open(recordingListener().listener, { ask: false });
    expect((await serial.worker.getPorts())[0]?.opened?.baudRate).toBe(9600);
    await source.close();
  });

  it.each([1, 20])('puts the box’s instants on the page’s session clock, at rate %d', async (rate) => {
    const { send, observations, source, clock } = await openSerial(rate);
    const sent: { count: number; at: number }[] = [];
    for (let i = 0; i < 300; i += 1) {
      sent.push({ count: i, at: clock.now() });
      // The box counts session time; the line goes out up to 9 ms late.
      const boxUs = Math.round(20_000 * rate * i);
      await vi.advanceTimersByTimeAsync((i * 7) % 10);
      send(writeWheel(0, i, boxUs));
      await vi.advanceTimersByTimeAsync(20 - ((i * 7) % 10));
    }
    await vi.advanceTimersByTimeAsync(100);
    const got = pulses(observations);
    expect(got.map((p) => p.count)).toEqual(sent.map((s) => s.count));
    for (const [i, pulse] of got.entries()) {
      // Within the first tenth of a second the least delay is still being found.
      if (i > 10) expect(Math.abs(pulse.at - (sent[i]?.at ?? 0))).toBeLessThan(100 * rate);
    }
    await source.close();
  });

  it('brings pulses within 50 ms and a button at once', async () => {
    const { send, observations, source } = await openSerial();
    send(writeWheel(0, 1, 0));
    await vi.advanceTimersByTimeAsync(51);
    expect(observations).toHaveLength(1);
    send(writeWheel(0, 2, 60_000) + writeButton(0, 1, 60_000));
    await vi.advanceTimersByTimeAsync(1);
    expect(observations.map((o) => o.type)).toEqual(['pulse.v1', 'pulse.v1', 'button.v1']);
    await source.close();
  });

  it.each(['BreakError', 'FramingError', 'ParityError', 'BufferOverrunError'])(
    'after %s, a thousand times, reads on within 50 ms, counts every torn line and invents nothing',
    async (name) => {
      const { send, serial, observations, source, last } = await openSerial();
      const expected: number[] = [];
      for (let i = 0; i < 1000; i += 1) {
        const line = writeWheel(0, i, (i * 40_000) % 2 ** 32);
        send(line);
        expected.push(i);
        await vi.advanceTimersByTimeAsync(5);
        send(writeWheel(0, 777_777, 5).slice(0, 12));
        await vi.advanceTimersByTimeAsync(1);
        serial.send({ kind: 'error', name });
        await vi.advanceTimersByTimeAsync(34);
      }
      send(writeWheel(0, 1000, 40_000_000));
      await vi.advanceTimersByTimeAsync(2000);
      expect(pulses(observations).map((p) => p.count)).toEqual([...expected, 1000]);
      expect(last()).toMatchObject({ goodLines: 1001, garbledLines: 1000, failure: null });
      await source.close();
    },
    20_000,
  );

  it('loses nothing when a busy worker leaves bytes in the buffer, up to its size', async () => {
    const { serial, source, observations } = await openSerial();
    const lines = Array.from({ length: 5000 }, (_, i) => writeWheel(0, i, i * 1000)).join('');
    serial.send({ kind: 'bytes', bytes: bytesOf(lines) });
    await vi.advanceTimersByTimeAsync(200);
    expect(pulses(observations)).toHaveLength(5000);
    await source.close();
  });

  it('says lost when unplugged, and picks the box up again by itself', async () => {
    const { send, serial, observations, source, last } = await openSerial();
    send(writeWheel(0, 1, 0));
    await vi.advanceTimersByTimeAsync(100);
    serial.send({ kind: 'unplug' });
    await vi.advanceTimersByTimeAsync(5000);
    expect(last()).toMatchObject({ state: 'lost', failure: { code: 'lost' } });
    serial.send({ kind: 'plug' });
    await vi.advanceTimersByTimeAsync(200);
    send(writeWheel(0, 2, 5_000_000));
    await vi.advanceTimersByTimeAsync(100);
    expect(pulses(observations).map((p) => p.count)).toEqual([1, 2]);
    expect(last()).toMatchObject({ state: 'live', failure: null });
    await source.close();
  });

  it('closes while the box is unplugged', async () => {
    const { serial, source, last } = await openSerial();
    serial.send({ kind: 'unplug' });
    await vi.advanceTimersByTimeAsync(1500);
    await source.close();
    expect(last()?.state).toBe('closed');
    serial.send({ kind: 'plug' });
    await vi.advanceTimersByTimeAsync(3000);
    expect((await serial.worker.getPorts())[0]?.opened).toBeNull();
  });

  it('says who holds the port, after giving a reloaded page time to let go', async () => {
    const { clock, workerStamp } = createTestClock();
    const serial = createScriptedSerial(true);
    const source = createSerialSource({ clock, serial: serial.page, startWorker: () => startInProcess(serial.worker, workerStamp) });
    serial.send({ kind: 'taken', taken: true });
    const refused = source.open(recordingListener().listener, { ask: false });
    await vi.advanceTimersByTimeAsync(2000);
    expect(await refused).toMatchObject({ ok: false, error: { code: 'in-use' } });

    const opened = source.open(recordingListener().listener, { ask: false });
    await vi.advanceTimersByTimeAsync(300);
    serial.send({ kind: 'taken', taken: false });
    await vi.advanceTimersByTimeAsync(1000);
    expect(await opened).toEqual({ ok: true, value: undefined });
    await source.close();
  });

  it('says that nothing can be read at the wrong speed, and takes it back', async () => {
    const { send, source, last } = await openSerial();
    for (let i = 0; i < 60; i += 1) {
      send('\xf8\x00\x80\xe6\x0a\x1e\xf8\n');
      await vi.advanceTimersByTimeAsync(100);
    }
    expect(last()).toMatchObject({ state: 'live', failure: { code: 'garbled' } });
    send(writeWheel(0, 1, 0));
    await vi.advanceTimersByTimeAsync(1500);
    expect(last()?.failure).toBeNull();
    await source.close();
  });

  it('opens without a question once granted', async () => {
    const { source, run } = makeSerial({ granted: false });
    const heard = recordingListener();
    expect((await source.open(heard.listener, { ask: true })).ok).toBe(true);
    await source.close();
    expect((await source.open(heard.listener, { ask: false })).ok).toBe(true);
    await run(500);
    expect(heard.observations.length).toBeGreaterThan(0);
    await source.close();
  });
});
