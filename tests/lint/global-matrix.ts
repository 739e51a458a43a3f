/** Which globals a room may not touch. As in the import matrix, a later entry replaces an earlier one for the files it names. */
export interface GlobalRoom {
  readonly name: string;
  readonly files: readonly string[];
  readonly sample: string;
  readonly denied: readonly GlobalName[];
  /** `object.property` pairs. */
  readonly deniedProperties: readonly string[];
}

const REASONS = {
  navigator: 'Devices are reached through src/sensors, src/storage, src/sync or src/cockpit/devices.',
  performance: 'The session clock (src/run/clock.ts) is the only reader of performance; take the instant from it.',
  window: 'shared is pure: no DOM.',
  document: 'shared is pure: no DOM.',
  self: 'shared is pure: no worker scope.',
  globalThis: 'shared is pure: no globals.',
  process: 'shared is pure: no Node.',
  Buffer: 'shared is pure: no Node; use Uint8Array.',
  fetch: 'shared is pure: no I/O.',
  crypto: 'shared is pure: no randomness; identifiers and digests are made outside.',
  setTimeout: 'shared is pure: no timers; time arrives as data.',
  setInterval: 'shared is pure: no timers; time arrives as data.',
  queueMicrotask: 'shared is pure: no timers; time arrives as data.',
  localStorage: 'shared is pure: no storage.',
  indexedDB: 'shared is pure: no storage.',
  console: 'shared is pure: no output.',
} as const;

export type GlobalName = keyof typeof REASONS;

const THROUGH_WINDOW = (name: GlobalName) => [`window.${name}`, `self.${name}`, `globalThis.${name}`];
const DEVICES = ['serial', 'geolocation', 'wakeLock', 'usb', 'bluetooth', 'hid', 'vibrate'].map((device) => `navigator.${device}`);
const CLOCK = THROUGH_WINDOW('performance');

export const GLOBAL_ROOMS: readonly GlobalRoom[] = [
  {
    name: 'shared',
    files: ['shared/**'],
    sample: 'shared/pace/planted.ts',
    denied: Object.keys(REASONS) as GlobalName[],
    deniedProperties: ['Date.now', 'Math.random'],
  },
  {
    name: 'src',
    files: ['src/**'],
    sample: 'src/paddock/planted.ts',
    denied: ['navigator', 'performance'],
    deniedProperties: [...THROUGH_WINDOW('navigator'), ...CLOCK],
  },
  {
    // Locks, buckets, OPFS and being on line are not devices.
    name: 'src/storage and src/sync',
    files: ['src/storage/**', 'src/sync/**'],
    sample: 'src/storage/planted.ts',
    denied: ['performance'],
    deniedProperties: [...DEVICES, ...CLOCK],
  },
  {
    name: 'device rooms',
    files: ['src/sensors/**', 'src/cockpit/devices/**'],
    sample: 'src/sensors/planted.ts',
    denied: ['performance'],
    deniedProperties: CLOCK,
  },
  {
    name: 'session clock',
    files: ['src/run/clock.ts'],
    sample: 'src/run/clock.ts',
    denied: ['navigator'],
    deniedProperties: THROUGH_WINDOW('navigator'),
  },
  {
    // A worker has a time origin of its own; its stamps are bridged to the session clock by an explicit exchange.
    name: 'worker stamps',
    files: ['src/sensors/worker-stamp.ts'],
    sample: 'src/sensors/worker-stamp.ts',
    denied: ['navigator'],
    deniedProperties: THROUGH_WINDOW('navigator'),
  },
];

export function deniedGlobals(room: GlobalRoom): Record<string, string> {
  return Object.fromEntries(room.denied.map((name) => [name, REASONS[name]]));
}

export function deniedProperties(room: GlobalRoom): { object: string; property: string; message: string }[] {
  return room.deniedProperties.map((pair) => {
    const [object = '', property = ''] = pair.split('.');
    return { object, property, message: `${room.name} may not use ${pair}. See tests/lint/global-matrix.ts.` };
  });
}
