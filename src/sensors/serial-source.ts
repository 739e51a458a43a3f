import type { NewObservation } from '#shared/journal/observation.ts';
import { fail, ok, type Result } from '#shared/result.ts';
import { micros } from '#shared/units.ts';
import { pageStampNow, type SensorClock } from './sensor-clock.ts';
import type { SensorFailure, SensorListener, SensorSource } from './sensor-source.ts';
import { createSerialExchange } from './serial-exchange.ts';
import { errorName, serialFailure } from './serial-failures.ts';
import type { FromSerialWorker, SerialWorker } from './serial-messages.ts';
import { type SerialPortInfo, type WebSerial, webSerial } from './web-serial.ts';

export interface SerialSourceDeps {
  readonly clock: SensorClock;
  readonly baudRate?: number;
  /** The browser's own where left out; null for a browser without. */
  readonly serial?: WebSerial | null;
  readonly startWorker?: () => SerialWorker;
}

const BAUD_RATE = 115_200;
/** A receiver's date more than ten years before this has lost 1024 weeks. */
const DATE_FLOOR_MS = Date.UTC(2025, 0, 1);
const EXCHANGES = 8;
/** A worker that does not answer `close` in this time is ended all the same. */
const CLOSE_MS = 1000;

/** The pulse box and receiver on a serial port. The page asks for the port; a worker of its own opens and reads it. */
export function createSerialSource(deps: SerialSourceDeps): SensorSource {
  let line: SerialLine | null = null;
  const close = async (): Promise<void> => {
    const closing = line;
    line = null;
    await closing?.close();
  };
  return {
    name: 'serial',
    async open(listener, { ask }) {
      await close();
      const chosen = await choosePort(deps.serial === undefined ? webSerial() : deps.serial, ask);
      if (!chosen.ok) return chosen;
      listener.status({ state: 'opening', goodLines: 0, garbledLines: 0, failure: null });
      const opening = createLine(deps, listener);
      line = opening;
      const opened = await opening.open(chosen.value);
      if (!opened.ok && line === opening) await close();
      return opened;
    },
    close,
  };
}

/** Asks the person where wanted; otherwise a port that was granted before will do. */
async function choosePort(serial: WebSerial | null, ask: boolean): Promise<Result<SerialPortInfo | null, SensorFailure>> {
  if (serial?.requestPort === undefined) return fail(serialFailure('unsupported'));
  try {
    if (ask) return ok((await serial.requestPort()).getInfo());
    return (await serial.getPorts()).length > 0 ? ok(null) : fail(serialFailure('none-chosen'));
  } catch (error) {
    return fail(serialFailure(errorName(error) === 'SecurityError' ? 'denied' : 'none-chosen'));
  }
}

interface SerialLine {
  open(chosen: SerialPortInfo | null): Promise<Result<void, SensorFailure>>;
  close(): Promise<void>;
}

function createLine(
  { clock, baudRate = BAUD_RATE, startWorker = startSerialWorker }: SerialSourceDeps,
  listener: SensorListener,
): SerialLine {
  const worker = startWorker();
  const exchange = createSerialExchange(
    () => pageStampNow(clock),
    (message) => worker.postMessage(message),
  );
  let listening = true;
  let opened: (result: Result<void, SensorFailure>) => void = () => undefined;
  let closed: () => void = () => undefined;

  const observed = (observations: readonly NewObservation[]): void => {
    const workerZero = clock.at(exchange.offset ?? 0);
    listener.observed(observations.map((o) => ({ ...o, at: micros(workerZero + o.at) })));
  };
  const deliver = (message: FromSerialWorker): void => {
    if (message.type === 'stamp') exchange.answer(message);
    else if (message.type === 'opened') opened(ok(undefined));
    else if (message.type === 'open-failed') opened(fail(message.failure));
    else if (message.type === 'closed') closed();
    else if (listening && message.type === 'status') listener.status(message.status);
    else if (listening && message.type === 'observations') observed(message.observations);
  };
  const broken = (): void => {
    const failure = serialFailure('unsupported');
    opened(fail(failure));
    if (listening) listener.status({ state: 'lost', goodLines: 0, garbledLines: 0, failure });
  };

  return {
    async open(chosen) {
      const result = new Promise<Result<void, SensorFailure>>((resolve) => {
        opened = resolve;
      });
      worker.listen(deliver, broken);
      // The offset must be known before the first observation; a worker that cannot start ends the wait.
      await Promise.race([exchange.measure(EXCHANGES), result]);
      worker.postMessage({ type: 'open', baudRate, chosen, rate: clock.rate, dateFloorMs: DATE_FLOOR_MS });
      return result;
    },
    async close() {
      listening = false;
      opened(fail(serialFailure('lost')));
      await new Promise<void>((resolve) => {
        const timer = setTimeout(resolve, CLOSE_MS);
        closed = () => {
          clearTimeout(timer);
          resolve();
        };
        worker.postMessage({ type: 'close' });
      });
      worker.terminate();
      listener.status({ state: 'closed', goodLines: 0, garbledLines: 0, failure: null });
    },
  };
}

function startSerialWorker(): SerialWorker {
  const worker = new Worker(new URL('./serial-worker.ts', import.meta.url), { type: 'module', name: 'serial' });
  return {
    postMessage: (message) => worker.postMessage(message),
    listen(listener, broken) {
      worker.onmessage = (event: MessageEvent<FromSerialWorker>) => listener(event.data);
      worker.onerror = broken;
    },
    terminate: () => worker.terminate(),
  };
}
