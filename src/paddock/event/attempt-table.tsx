import { Link } from 'react-router';
import { formatClock } from '#shared/course/format.ts';
import { Cell, DataTable, FigureCell, Row, RowHead } from '#src/paddock/parts/data-table.tsx';
import { timeErrorText } from '#src/paddock/parts/time-error.tsx';
import { formatDay } from '#src/paddock/parts/when.ts';
import type { StoredPack } from '#src/storage/pack-store.ts';
import { type AttemptData, isStale, type PlacedAttempt } from './next-thing.ts';

/** Every attempt of the team's entries, one line each; choosing one brings it to the top of the page. */
export function AttemptTable({
  attempts,
  chosen,
  packOf,
}: {
  readonly attempts: readonly PlacedAttempt[];
  readonly chosen: string;
  readonly packOf: (attemptId: string) => StoredPack | null;
}) {
  return (
    <DataTable
      caption="attempts"
      head={[
        { name: 'attempt' },
        { name: 'course', wide: true },
        { name: 'release', figures: true },
        { name: 'pack', wide: true },
        { name: 'finish', unit: 'seconds', figures: true },
      ]}
    >
      {attempts.map(({ event, entry, attempt }) => (
        <Row key={attempt.id}>
          <RowHead>
            <Link
              className={attempt.id === chosen ? 'font-bold' : 'underline underline-offset-4'}
              aria-current={attempt.id === chosen ? 'true' : undefined}
              to={`/event/${event.id}?attempt=${attempt.id}`}
            >
              number&nbsp;{entry.number}, attempt&nbsp;{attempt.number}
            </Link>
            <span className="text-quiet block text-sm">{entry.car.name}</span>
          </RowHead>
          <Cell wide>{attempt.courseBook.name}</Cell>
          <td className="px-1.5 py-2 text-right md:px-2">
            <span className="font-figure">{attempt.releaseMs === null ? 'not set' : formatClock(attempt.releaseMs, event.timeZone)}</span>
            {attempt.releaseMs === null ? null : (
              <span className="text-quiet block text-sm whitespace-nowrap">{formatDay(attempt.releaseMs, event.timeZone)}</span>
            )}
          </td>
          <Cell wide>{packWords(attempt, packOf(attempt.id))}</Cell>
          <FigureCell>{finishText(attempt)}</FigureCell>
        </Row>
      ))}
    </DataTable>
  );
}

function packWords(attempt: AttemptData, pack: StoredPack | null): string {
  if (pack === null) return 'not here';
  return isStale(attempt, pack) ? 'out of date' : 'stored';
}

/** Of the run that counts, else of the newest real one. */
function finishText({ runs, countingRunId }: AttemptData): string | null {
  const run = runs.find(({ id }) => id === countingRunId) ?? runs.find(({ practice, finish }) => !practice && finish !== null);
  return run?.finish ? timeErrorText(run.finish.timeErrorS, 2) : null;
}
