import { Link } from 'react-router';
import { formatDistance, formatDuration } from '#shared/course/format.ts';
import type { RaceClass } from '#shared/course/race-class.ts';
import { FigureRow } from '#src/components/figure.tsx';
import { TimeError } from '#src/paddock/parts/time-error.tsx';
import { dayAndClock } from '#src/paddock/parts/when.ts';
import type { StoredPack } from '#src/storage/pack-store.ts';
import { isDone, isStale, type PlacedAttempt } from './next-thing.ts';
import { PLAIN_LINK } from './next-thing-field.tsx';
import { PackOnDeviceWords, StorePackButton } from './pack-on-device.tsx';
import { ReleaseEditor } from './release-form.tsx';

/** One go at the course: what it is, its release, its pack on this tablet, its runs. */
export function AttemptSection({
  placed,
  pack,
  editing,
  setEditing,
}: {
  readonly placed: PlacedAttempt;
  readonly pack: StoredPack | null;
  readonly editing: boolean;
  readonly setEditing: (editing: boolean) => void;
}) {
  const { event, entry, attempt } = placed;
  const raceClass = event.raceClasses.find(({ id }) => id === entry.raceClassId);
  const { courseBook } = attempt;
  return (
    <section className="mb-10" aria-label={`attempt ${attempt.number} of number ${entry.number}`}>
      <h2 className="text-xl font-bold">
        Number {entry.number}, attempt {attempt.number}: {courseBook.name}
      </h2>
      <p className="text-quiet mb-2">
        {entry.car.name}; {entry.crew.map(({ name, role }) => `${name}, ${role}`).join('; ')}
      </p>
      <dl>
        <FigureRow label="course">
          <Right>
            {formatDistance(courseBook.lengthM, courseBook.unit, 3)} {courseBook.unit}
          </Right>
          <Quiet>
            {counted(courseBook.checkpoints, 'checkpoint')}, {attempt.ownCheckpoints === 0 ? 'none' : attempt.ownCheckpoints} of your own,{' '}
            {counted(courseBook.zones, 'zone')}, version {courseBook.version}
          </Quiet>
        </FigureRow>
        {raceClass === undefined ? null : <ClassRow raceClass={raceClass} />}
        <FigureRow label="release">
          <Release placed={placed} editing={editing} setEditing={setEditing} />
        </FigureRow>
        <FigureRow label="pack">
          <PackOnDeviceWords attempt={attempt} pack={pack} />
        </FigureRow>
        <RunRows placed={placed} />
      </dl>
      {isDone(attempt) && entry.mayPrepare ? (
        <div className="mt-4 flex flex-wrap gap-3">
          {pack === null ? null : (
            <a className={PLAIN_LINK} href={`/cockpit/${attempt.id}`}>
              open cockpit for a rerun
            </a>
          )}
          {attempt.packFault === null && (pack === null || isStale(attempt, pack)) ? (
            <StorePackButton attemptId={attempt.id} again={pack !== null} kind="plain" />
          ) : null}
        </div>
      ) : null}
    </section>
  );
}

function Release({ placed, editing, setEditing }: Pick<Parameters<typeof AttemptSection>[0], 'placed' | 'editing' | 'setEditing'>) {
  const { event, entry, attempt } = placed;
  if (editing) {
    return (
      <div className="font-text font-normal whitespace-normal">
        <ReleaseEditor placed={placed} done={() => setEditing(false)} />
      </div>
    );
  }
  return (
    <span className="flex flex-wrap items-baseline justify-end gap-x-4">
      {entry.mayPrepare ? (
        <button type="button" className="font-text min-h-8 font-normal underline underline-offset-4" onClick={() => setEditing(true)}>
          {attempt.releaseMs === null ? 'set' : 'change'}
        </button>
      ) : null}
      <span className="whitespace-normal">{attempt.releaseMs === null ? 'not set' : dayAndClock(attempt.releaseMs, event.timeZone)}</span>
    </span>
  );
}

function ClassRow({ raceClass }: { readonly raceClass: RaceClass }) {
  const { cap, floor } = raceClass;
  const averages = raceClass.sections.flatMap((section) =>
    section.kind === 'average' ? [`${section.average.text} ${section.average.unit}`] : ['neutral'],
  );
  return (
    <FigureRow label="class">
      <Right>{formatDuration(raceClass.targetTimeMs / 1000, 3)}</Right>
      <Quiet>
        {raceClass.name}; average {averages.join(', ')}
        {cap === null ? '' : `; cap ${cap.text} ${cap.unit}`}
        {floor === null ? '' : `; floor ${floor.text} ${floor.unit}`}
      </Quiet>
    </FigureRow>
  );
}

function RunRows({ placed }: { readonly placed: PlacedAttempt }) {
  return placed.attempt.runs.map((run) => (
    <FigureRow key={run.id} label={run.counts ? 'run that counts' : run.practice ? 'practice run' : 'run'}>
      <Link className="underline underline-offset-4" to={`/runs/${run.id}`}>
        {run.finish === null ? (run.outcome ?? run.status) : <TimeError seconds={run.finish.timeErrorS} decimals={2} />}
      </Link>
    </FigureRow>
  ));
}

/** `1 zone`, `2 zones`, `no zones`. */
const counted = (n: number, one: string): string => `${n === 0 ? 'no' : n} ${one}${n === 1 ? '' : 's'}`;

function Right({ children }: { readonly children: React.ReactNode }) {
  return <span className="block text-right">{children}</span>;
}

function Quiet({ children }: { readonly children: React.ReactNode }) {
  return <span className="font-text text-quiet block text-right text-sm font-normal whitespace-normal">{children}</span>;
}
