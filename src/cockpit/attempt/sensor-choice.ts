import type { RunHeader } from '#shared/journal/run-header.ts';
import { fail, type Result } from '#shared/result.ts';
import { canReadLocation, canReadSerial } from '#src/cockpit/devices/support.ts';
import type { RunSession } from '#src/run/run-session-contract.ts';
import type { SensorFailure, SensorSource } from '#src/sensors/sensor-source.ts';

export type SourceName = SensorSource['name'];

const WORDS: Readonly<Record<SourceName, string>> = { serial: 'pulse box', geolocation: 'tablet GNSS', simulator: 'simulator' };
/** Which source this device used last, so that a reloaded page finds it again without a touch. */
const KEPT = 'evenline.source';

/** The sources that this run may use on this device: a class may forbid some; practice has the simulator as well. */
export function sourcesFor(header: Pick<RunHeader, 'practice' | 'pack'>): readonly { readonly name: SourceName; readonly words: string }[] {
  const { aids } = header.pack.raceClass;
  const names: SourceName[] = [];
  if (header.practice) names.push('simulator');
  if (canReadSerial() && (aids.wheel || aids.gnssSpeed || aids.gnssPosition)) names.push('serial');
  if (canReadLocation() && (aids.gnssSpeed || aids.gnssPosition)) names.push('geolocation');
  return names.map((name) => ({ name, words: WORDS[name] }));
}

export async function attachSource(session: RunSession, name: SourceName, ask: boolean): Promise<Result<void, SensorFailure>> {
  const source = await createSource(session, name).catch(() => null);
  if (source === null) return fail(NOT_HERE);
  const attached = await session.attach(source, { ask });
  if (attached.ok) localStorage.setItem(KEPT, name);
  return attached;
}

/** After a reload: the source that was in use, if it can be opened without asking. */
export async function attachAgain(session: RunSession): Promise<void> {
  if (session.role === 'reader') return;
  const kept = localStorage.getItem(KEPT);
  const again = sourcesFor(session.header).find(({ name }) => name === kept);
  if (again !== undefined) await attachSource(session, again.name, false);
}

const NOT_HERE: SensorFailure = {
  code: 'unsupported',
  message: 'The part that reads this sensor could not be loaded. Try again, with a connection if there is one.',
};

/** A run loads the one that it uses. Precached, so that none of them needs a connection. */
async function createSource(session: RunSession, name: SourceName): Promise<SensorSource> {
  const { clock } = session;
  switch (name) {
    case 'serial':
      return (await import('#src/sensors/serial-source.ts')).createSerialSource({ clock });
    case 'geolocation':
      return (await import('#src/sensors/geolocation-source.ts')).createGeolocationSource({ clock });
    case 'simulator':
      return (await import('./simulator.ts')).createPracticeSource(session);
  }
}
