import type { ToSerialWorker } from './serial-messages.ts';
import { createSerialWorkerCore } from './serial-worker-core.ts';
import { webSerial } from './web-serial.ts';
import { workerStamp } from './worker-stamp.ts';

/** The dedicated worker that owns the serial port, so that a busy page loses no bytes. */
const handle = createSerialWorkerCore({
  serial: webSerial(),
  stamp: workerStamp,
  post: (message) => self.postMessage(message),
});
self.addEventListener('message', (event: MessageEvent<ToSerialWorker>) => handle(event.data));
