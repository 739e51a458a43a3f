import type { RunHeader } from '#shared/journal/run-header.ts';
import type { Result } from '#shared/result.ts';
import { canReadLocation, canReadSerial } from '#src/cockpit/devices/support.ts';
import type { RunSession } from '#src/run/run-session-contract.ts';
import { createGeolocationSource } from '#src/sensors/geolocation-source.ts';
import type { SensorFailure, SensorSource } from '#src/sensors/sensor-source.ts';
import { createSerialSource } from '#src/sensors/serial-source.ts';

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
  const attached = await session.attach(await createSource(session, name), { ask });
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

async function createSource(session: RunSession, name: SourceName): Promise<SensorSource> {
  const { clock } = session;
  switch (name) {
    case 'serial':
      return createSerialSource({ clock });
    case 'geolocation':
      return createGeolocationSource({ clock });
    case 'simulator':
      // Practice alone needs a drive and a replay; a run in the car does not wait for them. Precached like everything else.
      return (await import('./simulator.ts')).createPracticeSource(session);
  }
}
