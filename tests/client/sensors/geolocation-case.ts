import { vi } from 'vitest';
import { createGeolocationSource } from '#src/sensors/geolocation-source.ts';
import type { SourceCase } from '#tests/client/sensors/sensor-source-contract.ts';
import { createTestClock } from '#tests/client/sensors/test-clock.ts';

type Watch = Pick<Geolocation, 'watchPosition' | 'clearWatch'>;

export interface ScriptedGeolocation extends Watch {
  position(coords: Partial<GeolocationCoordinates>, timestamp: number): void;
  error(code: number): void;
  /** Options of the newest watch. */
  readonly asked: PositionOptions | undefined;
}

/** Calls whoever watches, as the browser would; nobody after `clearWatch`. */
export function createScriptedGeolocation(): ScriptedGeolocation {
  const watches = new Map<number, { readonly found: PositionCallback; readonly failed: PositionErrorCallback | null | undefined }>();
  let nextId = 1;
  let asked: PositionOptions | undefined;
  return {
    watchPosition(found, failed, options) {
      asked = options;
      watches.set(nextId, { found, failed });
      return nextId++;
    },
    clearWatch: (id) => void watches.delete(id),
    position(coords, timestamp) {
      const full = { latitude: 45, longitude: -30, accuracy: 6, speed: 20, heading: 90, altitude: null, altitudeAccuracy: null, ...coords };
      const position = { coords: full, timestamp } as GeolocationPosition;
      for (const { found } of watches.values()) found(position);
    },
    error(code) {
      for (const { failed } of watches.values()) failed?.({ code, message: '' } as GeolocationPositionError);
    },
    get asked() {
      return asked;
    },
  };
}

export function makeGeolocation(options: { readonly granted: boolean; readonly rate?: number; readonly ageMs?: number }) {
  const { clock, wall } = createTestClock(options.rate);
  const geolocation = createScriptedGeolocation();
  let permission: PermissionState = options.granted ? 'granted' : 'prompt';
  const source = createGeolocationSource({ clock, wall, geolocation, permission: async () => permission });
  let quiet = false;
  const run = async (ms: number): Promise<void> => {
    for (let t = 0; t < ms; t += 500) {
      if (!quiet) geolocation.position({}, wall() - (options.ageMs ?? 300));
      await vi.advanceTimersByTimeAsync(500);
    }
  };
  return {
    source,
    clock,
    wall,
    geolocation,
    run,
    granted: options.granted,
    silence: (value: boolean) => {
      quiet = value;
    },
    setPermission: (state: PermissionState) => {
      permission = state;
    },
  };
}

export const GEOLOCATION_CASE: SourceCase = {
  name: 'geolocation',
  make: makeGeolocation,
  unsupported: () => createGeolocationSource({ clock: createTestClock().clock, geolocation: null, permission: async () => 'granted' }),
  refused: () => {
    const geolocation = createScriptedGeolocation();
    const asking: Watch = {
      clearWatch: geolocation.clearWatch,
      watchPosition: (found, failed, options) => {
        queueMicrotask(() => geolocation.error(1));
        return geolocation.watchPosition(found, failed, options);
      },
    };
    return createGeolocationSource({ clock: createTestClock().clock, geolocation: asking, permission: async () => 'prompt' });
  },
};
