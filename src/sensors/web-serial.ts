/** The part of the Web Serial API that is used. Source: WICG "Web Serial API", wicg.github.io/serial. */

export interface SerialPortInfo {
  readonly usbVendorId?: number;
  readonly usbProductId?: number;
}

export interface WebSerialPort {
  readonly readable: ReadableStream<Uint8Array> | null;
  getInfo(): SerialPortInfo;
  open(options: { readonly baudRate: number; readonly bufferSize: number }): Promise<void>;
  close(): Promise<void>;
}

export interface WebSerial {
  getPorts(): Promise<readonly WebSerialPort[]>;
  /** On a page only, and only within a person's touch. */
  requestPort?(): Promise<WebSerialPort>;
  addEventListener(type: 'connect', listener: () => void): void;
  removeEventListener(type: 'connect', listener: () => void): void;
}

/** This page's or worker's Web Serial, or null where the browser has none. */
export function webSerial(): WebSerial | null {
  return (navigator as Navigator & { readonly serial?: WebSerial }).serial ?? null;
}

/** Of the granted ports, the one that was chosen; without a choice, or where it is gone, the last granted. */
export function pickPort(ports: readonly WebSerialPort[], chosen: SerialPortInfo | null): WebSerialPort | null {
  const same = ports.filter((port) => {
    const info = port.getInfo();
    return chosen !== null && info.usbVendorId === chosen.usbVendorId && info.usbProductId === chosen.usbProductId;
  });
  return same.at(-1) ?? ports.at(-1) ?? null;
}
