import type { ReactNode } from 'react';
import { Link } from 'react-router';
import { CAUTIONS } from '#shared/cautions.ts';
import { Button } from '#src/components/button.tsx';
import { Icon } from '#src/components/icon.tsx';
import type { StoredPack } from '#src/storage/pack-store.ts';
import { type NextThing, nextThing, type PlacedAttempt } from './next-thing.ts';
import { StorePackButton } from './pack-on-device.tsx';

export const MAIN_LINK = 'rounded-paddock bg-ink text-ground border-ink inline-flex min-h-11 items-center border px-4 py-2 font-bold';
export const PLAIN_LINK = 'rounded-paddock border-ink inline-flex min-h-11 items-center border px-4 py-2 font-bold';

/** Stands first on the page: how far this attempt is, and the one act that comes next. */
export function NextThingField({
  placed,
  pack,
  editRelease,
}: {
  readonly placed: PlacedAttempt;
  readonly pack: StoredPack | null;
  readonly editRelease: () => void;
}) {
  const next = nextThing(placed, pack, CAUTIONS.length);
  return (
    <section aria-labelledby="next-thing" className="bg-pool mb-8 grid gap-4 p-5 md:p-6">
      <h2 id="next-thing" className="text-quiet">
        next, for attempt {placed.attempt.number} of number {placed.entry.number}
      </h2>
      <ul className="font-figure grid gap-x-8 gap-y-2 text-lg font-extrabold lg:grid-cols-2">
        {next.readiness.map(({ words, done }) => (
          <li key={words} className="flex items-center gap-3">
            {done === null ? <span className="size-5" /> : <Icon name={done ? 'ready' : 'missing'} className="size-5" />}
            <span className={done !== false ? '' : 'underline decoration-dotted underline-offset-4'}>{words}</span>
          </li>
        ))}
      </ul>
      <p className="max-w-prose">{next.why}</p>
      <Act next={next} placed={placed} packHere={pack !== null} editRelease={editRelease} />
    </section>
  );
}

function Act({
  next,
  placed,
  packHere,
  editRelease,
}: {
  readonly next: NextThing;
  readonly placed: PlacedAttempt;
  readonly packHere: boolean;
  readonly editRelease: () => void;
}): ReactNode {
  const { attempt, entry } = placed;
  switch (next.act) {
    case 'set the release':
      return entry.mayPrepare ? (
        <div className="flex flex-wrap gap-3">
          <Button kind="main" onClick={editRelease}>
            set the release
          </Button>
          {packHere || attempt.packFault !== null ? null : <StorePackButton attemptId={attempt.id} again={false} kind="plain" />}
        </div>
      ) : (
        <p>The manager or the navigator sets it.</p>
      );
    case 'mend the pack':
      return null;
    case 'store the pack':
    case 'store the pack again':
      return <StorePackButton attemptId={attempt.id} again={next.act === 'store the pack again'} kind="main" />;
    case 'open the cockpit':
      return (
        <div className="flex flex-wrap gap-3">
          <a className={MAIN_LINK} href={`/cockpit/${attempt.id}`}>
            open cockpit
          </a>
          <Link className={PLAIN_LINK} to={`/plan/${attempt.id}`}>
            see the plan
          </Link>
        </div>
      );
    case 'read the run sheet': {
      const run = attempt.runs.find(({ id }) => id === attempt.countingRunId) ?? attempt.runs[0];
      return run === undefined ? null : (
        <div>
          <Link className={MAIN_LINK} to={`/runs/${run.id}`}>
            read the run sheet
          </Link>
        </div>
      );
    }
  }
}
