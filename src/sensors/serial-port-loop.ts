import { fail, ok, type Result } from '#shared/result.ts';
import type { SensorFailure } from './sensor-source.ts';
import { errorName, serialFailure } from './serial-failures.ts';
import { pickPort, type SerialPortInfo, type WebSerial, type WebSerialPort } from './web-serial.ts';

/**
 * Keeps one serial port read. Break, framing, parity and overrun errors end the stream and not the port: the stream is
 * taken again. Anything else means the port is lost: it is closed, and opened again once it is back.
 */
export interface PortLoop {
  readonly serial: WebSerial;
  readonly baudRate: number;
  readonly chosen: SerialPortInfo | null;
  bytes(chunk: Uint8Array): void;
  /** Bytes went missing here. */
  cut(): void;
  opened(): void;
  lost(): void;
}

/** The default of 255 bytes loses lines at the first stall; this is 22 s at 115200 baud. */
const BUFFER_SIZE = 262_144;
/** Source: "receiving data", WICG Web Serial API: these four are non-fatal, a new stream follows. */
const RECOVERABLE: ReadonlySet<string> = new Set(['BreakError', 'FramingError', 'ParityError', 'BufferOverrunError']);
/** After an error with no bytes in between, so that a floating wire cannot keep the worker spinning. */
const PAUSE_MS = 20;
/** How often a port that is lost is looked for, where no connect event tells of it. */
const LOOK_MS = 1000;
/** A page that was just reloaded may still be letting go of the port. */
const OPEN_TRIES = 5;
const OPEN_AGAIN_MS = 150;

const wait = (ms: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, ms));

/** Opens the port once, or says why not. */
export async function openPort(loop: PortLoop): Promise<Result<WebSerialPort, SensorFailure>> {
  for (let attempt = 1; ; attempt += 1) {
    const port = pickPort(await loop.serial.getPorts(), loop.chosen);
    if (port === null) return fail(serialFailure('none-chosen'));
    try {
      await port.open({ baudRate: loop.baudRate, bufferSize: BUFFER_SIZE });
      return ok(port);
    } catch (error) {
      if (errorName(error) === 'SecurityError') return fail(serialFailure('denied'));
      if (attempt === OPEN_TRIES) return fail(serialFailure('in-use'));
      await wait(OPEN_AGAIN_MS);
    }
  }
}

/** Reads the open port until `stop`, through every loss. Resolves with the port closed. */
export async function keepReading(first: WebSerialPort, loop: PortLoop, stop: AbortSignal): Promise<void> {
  let port: WebSerialPort | null = first;
  while (port !== null) {
    loop.opened();
    await readStreams(port, loop, stop);
    // A port whose device is gone may refuse to close; it is done with all the same.
    await port.close().catch(() => undefined);
    if (stop.aborted) return;
    loop.cut();
    loop.lost();
    port = await untilBack(loop, stop);
  }
}

async function readStreams(port: WebSerialPort, loop: PortLoop, stop: AbortSignal): Promise<void> {
  while (!stop.aborted && port.readable !== null) {
    const end = await readOneStream(port.readable, loop, stop);
    if (end === 'lost') return;
    if (end === 'cut') loop.cut();
    if (end === 'empty' && !stop.aborted) await wait(PAUSE_MS);
  }
}

/** `cut`: ended by a recoverable error; `empty`: ended before any byte came; `lost`: the port is gone. */
async function readOneStream(stream: ReadableStream<Uint8Array>, loop: PortLoop, stop: AbortSignal): Promise<'cut' | 'empty' | 'lost'> {
  const reader = stream.getReader();
  const cancel = (): void => void reader.cancel().catch(() => undefined);
  stop.addEventListener('abort', cancel, { once: true });
  let any = false;
  try {
    for (;;) {
      const { value, done } = await reader.read();
      if (done) return any ? 'cut' : 'empty';
      any = true;
      loop.bytes(value);
    }
  } catch (error) {
    if (!RECOVERABLE.has(errorName(error))) return 'lost';
    return any ? 'cut' : 'empty';
  } finally {
    stop.removeEventListener('abort', cancel);
    reader.releaseLock();
  }
}

/** Waits until the port is back and open, or `stop` (null). */
async function untilBack(loop: PortLoop, stop: AbortSignal): Promise<WebSerialPort | null> {
  while (!stop.aborted) {
    await connectedOrWaited(loop.serial, stop);
    if (stop.aborted) return null;
    const opened = await openPort(loop);
    if (opened.ok && !stop.aborted) return opened.value;
    if (opened.ok) await opened.value.close().catch(() => undefined);
  }
  return null;
}

function connectedOrWaited(serial: WebSerial, stop: AbortSignal): Promise<void> {
  return new Promise((resolve) => {
    const done = (): void => {
      clearTimeout(timer);
      serial.removeEventListener('connect', done);
      stop.removeEventListener('abort', done);
      resolve();
    };
    const timer = setTimeout(done, LOOK_MS);
    serial.addEventListener('connect', done);
    stop.addEventListener('abort', done, { once: true });
  });
}
