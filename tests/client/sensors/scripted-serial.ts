import type { FromSerialWorker, SerialWorker, ToSerialWorker } from '#src/sensors/serial-messages.ts';
import { createSerialWorkerCore } from '#src/sensors/serial-worker-core.ts';
import { type FakeSerial, type FakeSerialCommand, installFakeSerial } from '#tests/e2e/support/fake-serial.ts';

/** A scripted device with the page's and the worker's `navigator.serial`, each of their own as in a browser. */
export interface ScriptedSerial {
  readonly page: FakeSerial;
  readonly worker: FakeSerial;
  send(command: FakeSerialCommand): void;
}

export function createScriptedSerial(granted = false): ScriptedSerial {
  let isGranted = granted;
  const handlers: ((command: FakeSerialCommand) => void)[] = [];
  const channel = { listen: (handler: (command: FakeSerialCommand) => void) => void handlers.push(handler) };
  const memory = {
    get: () => isGranted,
    grant: () => {
      isGranted = true;
    },
  };
  return {
    page: installFakeSerial(channel, memory),
    worker: installFakeSerial(channel, memory),
    send: (command) => {
      for (const handler of handlers) handler(command);
    },
  };
}

/** The real worker's code over a message link; only the thread itself is missing. */
export function startInProcess(serial: FakeSerial | null, stamp: () => number): SerialWorker {
  let listener: (message: FromSerialWorker) => void = () => undefined;
  let running = true;
  const handle = createSerialWorkerCore({
    serial,
    stamp,
    post: (message) => queueMicrotask(() => running && listener(structuredClone(message))),
  });
  return {
    postMessage: (message: ToSerialWorker) => queueMicrotask(() => running && handle(structuredClone(message))),
    listen: (given) => {
      listener = given;
    },
    terminate: () => {
      running = false;
    },
  };
}
