/**
 * A scripted `navigator.serial` for page and worker alike: one USB device whose bytes, errors, plugging and unplugging come
 * as commands over a channel. This file imports nothing, so that its source can be put in front of a worker's script
 * (fake-serial-script.ts).
 */

export type FakeSerialCommand =
  | { readonly kind: 'bytes'; readonly bytes: Uint8Array }
  /** Ends the stream as a driver would: BreakError, FramingError, ParityError, BufferOverrunError, NetworkError. */
  | { readonly kind: 'error'; readonly name: string }
  | { readonly kind: 'unplug' }
  | { readonly kind: 'plug' }
  /** Another program takes the port (opening fails) or lets go of it. */
  | { readonly kind: 'taken'; readonly taken: boolean };

export interface FakeSerialChannel {
  listen(handler: (command: FakeSerialCommand) => void): void;
}

/** Where a grant is remembered, as a browser remembers it over a reload. */
export interface FakeSerialMemory {
  get(): boolean;
  grant(): void;
}

export interface FakePort extends EventTarget {
  readonly readable: ReadableStream<Uint8Array> | null;
  readonly opened: { readonly baudRate: number; readonly bufferSize: number } | null;
  getInfo(): { usbVendorId: number; usbProductId: number };
  open(options: { baudRate: number; bufferSize?: number }): Promise<void>;
  close(): Promise<void>;
}

export interface FakeSerial extends EventTarget {
  getPorts(): Promise<FakePort[]>;
  requestPort(): Promise<FakePort>;
}

interface Device {
  plugged: boolean;
  taken: boolean;
}

class ScriptedPort extends EventTarget implements FakePort {
  opened: { readonly baudRate: number; readonly bufferSize: number } | null = null;
  readonly #device: Device;
  #stream: ReadableStream<Uint8Array> | null = null;
  #controller: ReadableStreamDefaultController<Uint8Array> | null = null;
  #fatal = false;

  constructor(device: Device) {
    super();
    this.#device = device;
  }

  getInfo(): { usbVendorId: number; usbProductId: number } {
    return { usbVendorId: 0x1209, usbProductId: 0x0001 };
  }

  async open({ baudRate, bufferSize = 255 }: { baudRate: number; bufferSize?: number }): Promise<void> {
    if (this.opened !== null) throw new DOMException('The port is already open.', 'InvalidStateError');
    if (!this.#device.plugged || this.#device.taken) throw new DOMException('Failed to open serial port.', 'NetworkError');
    this.opened = { baudRate, bufferSize };
    this.#fatal = false;
  }

  /** As the specification has it: a new stream after each non-fatal error, null once closed or lost. */
  get readable(): ReadableStream<Uint8Array> | null {
    if (this.opened === null || this.#fatal) return null;
    this.#stream ??= new ReadableStream<Uint8Array>(
      {
        start: (controller) => {
          this.#controller = controller;
        },
        cancel: () => this.#drop(),
      },
      new ByteLengthQueuingStrategy({ highWaterMark: this.opened.bufferSize }),
    );
    return this.#stream;
  }

  async close(): Promise<void> {
    if (this.#stream?.locked === true) throw new TypeError('Cannot close a locked stream.');
    this.opened = null;
    this.#drop();
  }

  /** Bytes that nobody takes up are lost, as they are with a device. */
  take(bytes: Uint8Array): void {
    if (this.readable === null || this.#controller === null) return;
    if ((this.#controller.desiredSize ?? 0) < bytes.length) this.fail('BufferOverrunError');
    else this.#controller.enqueue(bytes);
  }

  fail(name: string): void {
    if (this.readable === null) return;
    const controller = this.#controller;
    this.#drop();
    if (name === 'NetworkError') this.#fatal = true;
    controller?.error(new DOMException(`The device reported ${name}.`, name));
  }

  #drop(): void {
    this.#stream = null;
    this.#controller = null;
  }
}

class ScriptedSerial extends EventTarget implements FakeSerial {
  readonly #device: Device;
  readonly #port: ScriptedPort;
  readonly #memory: FakeSerialMemory;

  constructor(device: Device, port: ScriptedPort, memory: FakeSerialMemory) {
    super();
    this.#device = device;
    this.#port = port;
    this.#memory = memory;
  }

  async getPorts(): Promise<FakePort[]> {
    return this.#device.plugged && this.#memory.get() ? [this.#port] : [];
  }

  async requestPort(): Promise<FakePort> {
    if (!this.#device.plugged) throw new DOMException('No port selected by the user.', 'NotFoundError');
    this.#memory.grant();
    return this.#port;
  }
}

export function installFakeSerial(channel: FakeSerialChannel, memory: FakeSerialMemory): FakeSerial {
  const device: Device = { plugged: true, taken: false };
  const port = new ScriptedPort(device);
  const serial = new ScriptedSerial(device, port, memory);
  const plug = (plugged: boolean): void => {
    device.plugged = plugged;
    if (!plugged) port.fail('NetworkError');
    serial.dispatchEvent(new Event(plugged ? 'connect' : 'disconnect'));
  };
  channel.listen((command) => {
    if (command.kind === 'bytes') port.take(command.bytes);
    else if (command.kind === 'error') port.fail(command.name);
    else if (command.kind === 'taken') device.taken = command.taken;
    else plug(command.kind === 'plug');
  });
  return serial;
}
