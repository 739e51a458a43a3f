import { createSentenceReader } from '#shared/sensor/sentence-reader.ts';
import type { SensorStatus } from './sensor-source.ts';
import { serialFailure } from './serial-failures.ts';
import { createSerialHealth } from './serial-health.ts';
import type { FromSerialWorker, ToSerialWorker } from './serial-messages.ts';
import { createSerialOutbox } from './serial-outbox.ts';
import { keepReading, openPort, type PortLoop } from './serial-port-loop.ts';
import type { WebSerial } from './web-serial.ts';

/** All of the serial worker but its global scope. */
export interface SerialWorkerScope {
  readonly serial: WebSerial | null;
  /** This scope's monotonic stamp, ms. */
  stamp(): number;
  post(message: FromSerialWorker): void;
}

type Open = Extract<ToSerialWorker, { type: 'open' }>;

const TICK_MS = 250;
const REPORT_MS = 1000;
const END_OF_LINE = Uint8Array.of(0x0a);

/** Returns the handler of the page's messages. */
export function createSerialWorkerCore(scope: SerialWorkerScope): (message: ToSerialWorker) => void {
  let stop = new AbortController();
  let done: Promise<void> = Promise.resolve();

  const close = async (): Promise<void> => {
    stop.abort();
    await done;
    scope.post({ type: 'closed' });
  };

  return (message) => {
    if (message.type === 'probe') scope.post({ type: 'stamp', id: message.id, stamp: scope.stamp() });
    else if (message.type === 'close') void close();
    else {
      stop = new AbortController();
      done = readUntil(message, scope, stop.signal);
    }
  };
}

async function readUntil(open: Open, scope: SerialWorkerScope, stop: AbortSignal): Promise<void> {
  if (scope.serial === null) return scope.post({ type: 'open-failed', failure: serialFailure('unsupported') });
  const line = createLine(open, scope);
  const loop: PortLoop = { serial: scope.serial, baudRate: open.baudRate, chosen: open.chosen, ...line };
  const opened = await openPort(loop);
  if (!opened.ok) return scope.post({ type: 'open-failed', failure: opened.error });
  scope.post({ type: 'opened' });
  const timer = setInterval(line.tick, TICK_MS);
  try {
    await keepReading(opened.value, loop, stop);
  } finally {
    clearInterval(timer);
    line.flush();
  }
}

/** One line's reader, batches and status, as the port loop drives them. */
function createLine(open: Open, scope: SerialWorkerScope) {
  const reader = createSentenceReader({ dateFloorMs: open.dateFloorMs, pace: open.rate });
  const outbox = createSerialOutbox((observations) => scope.post({ type: 'observations', observations }));
  const health = createSerialHealth();
  let reported: { readonly status: SensorStatus; readonly at: number } | null = null;

  const report = (): void => {
    const now = scope.stamp();
    const status = health.tick(now, reader.goodLines, reader.garbledLines);
    const same = reported?.status.state === status.state && reported.status.failure?.code === status.failure?.code;
    if (same && reported !== null && now - reported.at < REPORT_MS) return;
    reported = { status, at: now };
    scope.post({ type: 'status', status });
  };
  const feed = (bytes: Uint8Array): void => outbox.add(reader.push(bytes, scope.stamp() * 1000 * open.rate));

  return {
    bytes(chunk: Uint8Array): void {
      health.bytes(scope.stamp());
      feed(chunk);
      report();
    },
    // The line that was under way is ended, so that its rest can never be taken for the start of the next.
    cut: (): void => feed(END_OF_LINE),
    opened(): void {
      health.opened(scope.stamp());
      report();
    },
    lost(): void {
      health.lost();
      report();
    },
    tick(): void {
      // Gives out a fix that waits for sentences which do not come.
      feed(new Uint8Array());
      report();
    },
    flush: outbox.flush,
  };
}
