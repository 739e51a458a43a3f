import type { EventsResponse } from '#shared/api/events.ts';
import { formatClock } from '#shared/course/format.ts';
import { clockInZone } from '#src/paddock/parts/when.ts';

/** What stands first on the Event page: how far an attempt is prepared, and the one thing to do next. Pure. */

export type EventData = EventsResponse['events'][number];
export type EntryData = EventData['entries'][number];
export type AttemptData = EntryData['attempts'][number];

export interface PlacedAttempt {
  readonly event: EventData;
  readonly entry: EntryData;
  readonly attempt: AttemptData;
}

export interface PackOnDevice {
  readonly digest: string;
  readonly storedMs: number;
}

export type NextAct =
  | 'set the release'
  | 'mend the pack'
  | 'store the pack'
  | 'store the pack again'
  | 'open the cockpit'
  | 'read the run sheet';

export interface Readiness {
  readonly words: string;
  /** Null for what is only to be known. */
  readonly done: boolean | null;
}

export interface NextThing {
  readonly act: NextAct;
  /** `release 10:42:00`, `pack stored`, `set-up Gravel 16`, `6 cautions`, each done or still missing. */
  readonly readiness: readonly Readiness[];
  /** Why this comes next, one sentence. */
  readonly why: string;
}

/** Every attempt of the team's own entries, in the order of their releases. */
export function placedAttempts(events: readonly EventData[], teamId: string): readonly PlacedAttempt[] {
  return events
    .flatMap((event) =>
      event.entries
        .filter(({ team }) => team.id === teamId)
        .flatMap((entry) => entry.attempts.map((attempt) => ({ event, entry, attempt }))),
    )
    .sort(byTurn);
}

/** The attempt to prepare: the first that has no finished run, else the last one. Practice comes after the real thing. */
export function attemptToPrepare(events: readonly EventData[], teamId: string): PlacedAttempt | null {
  const all = placedAttempts(events, teamId);
  return all.find(({ attempt }) => !isDone(attempt)) ?? all.at(-1) ?? null;
}

export const isDone = (attempt: AttemptData): boolean =>
  attempt.countingRunId !== null || attempt.runs.some((run) => !run.practice && run.outcome === 'finished');

function byTurn(a: PlacedAttempt, b: PlacedAttempt): number {
  if (a.event.practice !== b.event.practice) return a.event.practice ? 1 : -1;
  return (a.attempt.releaseMs ?? Number.MAX_SAFE_INTEGER) - (b.attempt.releaseMs ?? Number.MAX_SAFE_INTEGER);
}

export function nextThing({ event, entry, attempt }: PlacedAttempt, pack: PackOnDevice | null, cautions: number): NextThing {
  const readiness: readonly Readiness[] = [
    {
      words: attempt.releaseMs === null ? 'release not set' : `release ${clockInZone(attempt.releaseMs, event.timeZone)}`,
      done: attempt.releaseMs !== null,
    },
    { words: packWords(attempt, pack, event.timeZone), done: pack !== null && !isStale(attempt, pack) },
    { words: `set-up ${entry.car.wheelSetup}`, done: true },
    { words: `${cautions} cautions`, done: null },
  ];
  return { readiness, ...chooseAct(attempt, pack, event.practice) };
}

export function isStale(attempt: AttemptData, pack: PackOnDevice): boolean {
  return attempt.packDigest !== null && attempt.packDigest !== pack.digest;
}

function packWords(attempt: AttemptData, pack: PackOnDevice | null, timeZone: string): string {
  if (pack === null) return 'pack not on this tablet';
  if (isStale(attempt, pack)) return 'pack on this tablet is out of date';
  return `pack stored ${formatClock(pack.storedMs, timeZone).slice(0, 5)}`;
}

/** On a practice grid any release will do; it is typed there. */
function chooseAct(attempt: AttemptData, pack: PackOnDevice | null, practice: boolean): { act: NextAct; why: string } {
  if (isDone(attempt))
    return { act: 'read the run sheet', why: 'This attempt has been driven. Its run sheet tells what happened, leg by leg.' };
  if (attempt.releaseMs === null && !practice)
    return { act: 'set the release', why: 'The start order gives the release; it can still be changed on the grid.' };
  if (attempt.packFault !== null) return { act: 'mend the pack', why: attempt.packFault };
  if (pack === null) return { act: 'store the pack', why: 'With the pack on this tablet the cockpit needs no connection.' };
  if (isStale(attempt, pack)) {
    return { act: 'store the pack again', why: 'Something changed since it was stored: release, course, class, crew or wheel scale.' };
  }
  return { act: 'open the cockpit', why: 'Everything is on this tablet. The grid check comes first.' };
}
