import { seedOf } from '#shared/drive/seed-of.ts';
import { fromNdjson } from '#shared/journal/ndjson.ts';
import type { PulseV1 } from '#shared/journal/observation.ts';
import { replay } from '#shared/journal/replay.ts';
import { readout as readoutOf } from '#shared/pace/run.ts';
import { micros } from '#shared/units.ts';
import type { RunSession } from '#src/run/run-session-contract.ts';
import type { SensorSource } from '#src/sensors/sensor-source.ts';
import { createSimulatorSource, type SimulatorSourceDeps } from '#src/sensors/simulator-source.ts';

type DriveStart = NonNullable<SimulatorSourceDeps['drive']>;

/**
 * The practice car: its driver follows what this session shows, and above real time its navigator touches the places.
 * After a reload the car goes on from the journal's last pulse, as a real one would have.
 */
export async function createPracticeSource(session: RunSession): Promise<SensorSource> {
  const { clock, header } = session;
  const display = (): ReturnType<NonNullable<SimulatorSourceDeps['display']>> => {
    const { hold, toRelease, phase } = session.readout();
    return { holdSpeed: hold.kind === 'none' ? null : hold.speed, toRelease, stopped: phase === 'stopped' };
  };
  const touches = header.clockRate > 1 ? { act: session.act } : {};
  return createSimulatorSource({
    clock,
    pack: header.pack,
    seed: seedOf(header.runId),
    display,
    drive: await driveStart(session),
    ...touches,
  });
}

async function driveStart(session: RunSession): Promise<DriveStart> {
  const official = session.readout().official;
  const utcMsAtZero = official === null ? null : official.now - session.clock.now() / 1000;
  const journal = fromNdjson(await session.exportJournal());
  if (!journal.ok) return { utcMsAtZero };
  const { header, observations } = journal.value;
  const last = observations.findLast((o): o is PulseV1 => o.type === 'pulse.v1' && o.channel === header.pack.wheel.channel);
  if (last === undefined) return { utcMsAtZero };
  const then = readoutOf(replay(header, observations), micros(last.at));
  const resume = { distance: then.distance, speed: then.speed ?? 0, count: last.count, boxUs: last.boxUs };
  return { utcMsAtZero, beginAt: last.at, resume };
}
