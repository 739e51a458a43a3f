import type { NewObservation } from '#shared/journal/observation.ts';
import { fail, ok, type Result } from '#shared/result.ts';
import { micros } from '#shared/units.ts';
import { createFixFreshness } from './fix-freshness.ts';
import type { SensorClock } from './sensor-clock.ts';
import type { SensorFailure, SensorFailureCode, SensorListener, SensorSource, SensorStatus } from './sensor-source.ts';

/** The tablet's own receiver through the Geolocation API: GNSS speed and position, no wheel. */
export interface GeolocationSourceDeps {
  readonly clock: SensorClock;
  /** The browser's own where left out; null for a browser without. */
  readonly geolocation?: Pick<Geolocation, 'watchPosition' | 'clearWatch'> | null;
  /** Where the permission stands; `unknown` where the browser does not tell. */
  readonly permission?: () => Promise<PermissionState | 'unknown'>;
  /** Unix ms of the wall clock, which positions are stamped by. */
  readonly wall?: () => number;
}

const SILENT_MS = 5000;
const PERMISSION_DENIED = 1;

const MESSAGES: Partial<Record<SensorFailureCode, string>> = {
  unsupported: 'This browser has no location. Use the pulse box, or another browser.',
  'none-chosen': 'Location is not allowed yet. Touch "Connect" and allow it when the browser asks.',
  denied: 'The browser does not let Evenline use the location. Allow it in the site settings, then connect again.',
  lost: 'The tablet finds no position. Check that location is on and that it sees the sky.',
};
const failure = (code: SensorFailureCode): SensorFailure => ({ code, message: MESSAGES[code] ?? '' });

export function createGeolocationSource(deps: GeolocationSourceDeps): SensorSource {
  const { geolocation = navigator.geolocation ?? null, permission = askedPermission } = deps;
  let end: (() => void) | null = null;
  const close = async (): Promise<void> => {
    end?.();
    end = null;
  };
  return {
    name: 'geolocation',
    async open(listener, { ask }): Promise<Result<void, SensorFailure>> {
      await close();
      if (geolocation === null) return fail(failure('unsupported'));
      const state = await permission();
      if (state === 'denied') return fail(failure('denied'));
      if (state !== 'granted' && !ask) return fail(failure('none-chosen'));
      listener.status({ state: 'opening', goodLines: 0, garbledLines: 0, failure: null });
      const watch = watchFixes(geolocation, deps, listener);
      end = watch.end;
      // A person who is being asked may refuse; where allowed already, the first fix can take minutes and is not waited for.
      const answer = state === 'granted' ? ok(undefined) : await watch.answered;
      if (!answer.ok) await close();
      return answer;
    },
    close,
  };
}

async function askedPermission(): Promise<PermissionState | 'unknown'> {
  try {
    return (await navigator.permissions.query({ name: 'geolocation' })).state;
  } catch {
    return 'unknown';
  }
}

function watchFixes(
  geolocation: Pick<Geolocation, 'watchPosition' | 'clearWatch'>,
  { clock, wall = Date.now }: GeolocationSourceDeps,
  listener: SensorListener,
) {
  const freshness = createFixFreshness();
  let answer: (result: Result<void, SensorFailure>) => void = () => undefined;
  const answered = new Promise<Result<void, SensorFailure>>((resolve) => {
    answer = resolve;
  });
  let goodLines = 0;
  let garbledLines = 0;
  let silence: ReturnType<typeof setTimeout> | null = null;

  const tell = (state: SensorStatus['state'], why: SensorFailure | null): void =>
    listener.status({ state, goodLines, garbledLines, failure: why });
  const expectAnother = (): void => {
    if (silence !== null) clearTimeout(silence);
    silence = setTimeout(() => tell('silent', null), SILENT_MS);
  };

  const positioned = (position: GeolocationPosition): void => {
    answer(ok(undefined));
    const age = freshness.age(position.timestamp, wall());
    if (age === null) garbledLines += 1;
    else {
      goodLines += 1;
      listener.observed([fixOf(position, micros(clock.now() - age * 1000 * clock.rate))]);
    }
    tell('live', null);
    expectAnother();
  };
  const refused = (error: { readonly code: number }): void => {
    const why = failure(error.code === PERMISSION_DENIED ? 'denied' : 'lost');
    answer(why.code === 'denied' ? fail(why) : ok(undefined));
    tell('lost', why);
  };
  const id = geolocation.watchPosition(positioned, refused, { enableHighAccuracy: true, maximumAge: 0 });
  expectAnother();

  const end = (): void => {
    geolocation.clearWatch(id);
    if (silence !== null) clearTimeout(silence);
    answer(fail(failure('lost')));
    tell('closed', null);
  };
  return { answered, end };
}

/** A missing speed or heading is null; browsers give NaN for the heading of a car that stands. */
const known = (value: number | null): number | null => (value === null || Number.isNaN(value) ? null : value);

function fixOf({ coords, timestamp }: GeolocationPosition, at: number): NewObservation {
  return {
    type: 'fix.v1',
    at,
    via: 'geolocation',
    lat: coords.latitude,
    lon: coords.longitude,
    speed: known(coords.speed),
    course: known(coords.heading),
    accuracy: coords.accuracy,
    utcMs: timestamp,
  };
}
