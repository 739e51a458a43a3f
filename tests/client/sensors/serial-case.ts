import { vi } from 'vitest';
import { writeGga, writeRmc, writeWheel } from '#shared/sensor/sentence-writer.ts';
import { createSerialSource } from '#src/sensors/serial-source.ts';
import { createScriptedSerial, startInProcess } from '#tests/client/sensors/scripted-serial.ts';
import type { SourceCase } from '#tests/client/sensors/sensor-source-contract.ts';
import { createTestClock } from '#tests/client/sensors/test-clock.ts';

export const bytesOf = (text: string): Uint8Array => Uint8Array.from(text, (c) => c.charCodeAt(0));
const UTC = Date.UTC(2026, 5, 1, 12);

/** A box at 50 lines a second and a receiver at 5 Hz, cut into chunks that end in the middle of lines. */
export function makeSerial(options: { readonly granted: boolean; readonly rate?: number }) {
  const { clock, workerStamp } = createTestClock(options.rate);
  const serial = createScriptedSerial(options.granted);
  const source = createSerialSource({ clock, serial: serial.page, startWorker: () => startInProcess(serial.worker, workerStamp) });
  let count = 0;
  let quiet = false;
  let kept = '';
  const sendLines = (ms: number): void => {
    count += 1;
    const t = UTC + ms;
    const fix = { utcMs: t, lat: 45, lon: -30, speed: 20, course: 90 };
    const text = kept + writeWheel(0, count, (ms * 1000) % 2 ** 32) + (ms % 200 === 0 ? writeGga(fix) + writeRmc(fix) : '');
    kept = text.slice(-9);
    serial.send({ kind: 'bytes', bytes: bytesOf(text.slice(0, -9)) });
  };
  let elapsed = 0;
  const run = async (ms: number): Promise<void> => {
    for (const end = elapsed + ms; elapsed < end; elapsed += 20) {
      if (!quiet) sendLines(elapsed);
      await vi.advanceTimersByTimeAsync(20);
    }
  };
  return {
    source,
    clock,
    serial,
    run,
    granted: options.granted,
    silence: (value: boolean) => {
      quiet = value;
    },
  };
}

export const SERIAL_CASE: SourceCase = {
  name: 'serial',
  make: makeSerial,
  unsupported: () => createSerialSource({ clock: createTestClock().clock, serial: null }),
  refused: () => {
    const serial = createScriptedSerial();
    serial.send({ kind: 'unplug' });
    return createSerialSource({ clock: createTestClock().clock, serial: serial.page });
  },
};
