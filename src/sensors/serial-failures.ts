import type { SensorFailure, SensorFailureCode } from './sensor-source.ts';

const MESSAGES = {
  unsupported: 'This browser cannot reach a pulse box. Open Evenline in Chromium 122 or later, on a computer or tablet with a USB port.',
  'none-chosen': 'No pulse box is chosen. Plug it in, touch "Connect" and pick it from the list.',
  'in-use': 'Another window or program holds the pulse box. Close it there, then connect again.',
  lost: 'The pulse box is unplugged or has no power. Plug it in again: Evenline picks it up by itself.',
  garbled: 'The pulse box sends, but nothing can be read. Check its baud rate and the cable.',
  denied: 'The browser does not let Evenline use a serial port. Allow it in the site settings, then connect again.',
} as const satisfies Record<SensorFailureCode, string>;

export const serialFailure = (code: SensorFailureCode): SensorFailure => ({ code, message: MESSAGES[code] });

/** The `name` of a DOMException, '' for anything else. */
export const errorName = (error: unknown): string =>
  typeof error === 'object' && error !== null && 'name' in error ? String(error.name) : '';
