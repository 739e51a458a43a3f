import type { RunSummary } from '#shared/api/runs.ts';
import type { StoredRunSummary } from '#src/storage/journal-store.ts';

/** Runs of the server and of this device as one list, newest first; a run on both is one row. Pure. */
export interface RunRow {
  readonly id: string;
  readonly createdMs: number;
  readonly timeZone: string;
  readonly eventName: string;
  readonly entryNumber: string;
  readonly carName: string;
  readonly attemptNumber: number;
  readonly practice: boolean;
  readonly server: RunSummary | null;
  readonly local: StoredRunSummary | null;
}

export function runRows(server: readonly RunSummary[], local: readonly StoredRunSummary[], teamId: string): readonly RunRow[] {
  const here = new Map(local.map((run) => [run.runId, run]));
  const known = new Set(server.map(({ id }) => id));
  const rows = [
    ...server.map((run) => fromServer(run, here.get(run.id) ?? null)),
    ...local.filter(({ runId, header }) => !known.has(runId) && header.pack.team.id === teamId).map(fromDevice),
  ];
  return rows.sort((a, b) => b.createdMs - a.createdMs);
}

function fromServer(run: RunSummary, local: StoredRunSummary | null): RunRow {
  const { id, createdMs, timeZone, eventName, entryNumber, carName, attemptNumber, practice } = run;
  return { id, createdMs, timeZone, eventName, entryNumber, carName, attemptNumber, practice, server: run, local };
}

export function fromDevice(local: StoredRunSummary): RunRow {
  const { header } = local;
  const { pack } = header;
  return {
    id: local.runId,
    createdMs: header.createdMs,
    timeZone: pack.event.timeZone,
    eventName: pack.event.name,
    entryNumber: pack.entry.number,
    carName: pack.car.name,
    attemptNumber: pack.attempt.number,
    practice: header.practice,
    server: null,
    local,
  };
}
