import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import { useParams } from 'react-router';
import type { EventsResponse } from '#shared/api/events.ts';
import { formatDistance, formatDuration, roundedDigits } from '#shared/course/format.ts';
import { metresPer } from '#shared/units.ts';
import { eventsQuery } from '#src/api/events/get-events.ts';
import { garageQuery } from '#src/api/teams/get-garage.ts';
import { Button } from '#src/components/button.tsx';
import { EmptyState } from '#src/components/empty-state.tsx';
import { PageTitle } from '#src/components/page-title.tsx';
import { usePacks } from '#src/paddock/device/use-stored.ts';
import { attemptToPrepare, type PlacedAttempt } from '#src/paddock/event/next-thing.ts';
import { StorePackButton } from '#src/paddock/event/pack-on-device.tsx';
import { PracticeEventButton } from '#src/paddock/event/practice-event-button.tsx';
import { Loaded } from '#src/paddock/parts/loaded.tsx';
import { dayAndClock } from '#src/paddock/parts/when.ts';
import { useSignedIn } from '#src/paddock/signed-in.tsx';
import type { StoredPack } from '#src/storage/pack-store.ts';
import { CockpitSettingsSection } from './cockpit-settings-section.tsx';
import { planOfPack } from './pack-plan.ts';
import { PlanCautions } from './plan-cautions.tsx';
import { PlanCharts } from './plan-charts.tsx';
import { PlanTable } from './plan-table.tsx';

/** The plan of the pack on this device: what the cockpit will follow is what is read and printed here. */
export function PlanPage() {
  const { user, team } = useSignedIn();
  const { attemptId } = useParams();
  const events = useQuery(eventsQuery(user.id, team.id));
  const packs = usePacks();
  const placed = events.data === undefined ? null : findAttempt(events.data, attemptId, team.id);
  const stored = packs?.find((pack) => pack.attemptId === (attemptId ?? placed?.attempt.id));
  return (
    <>
      {stored === undefined ? (
        <Loaded query={events}>{() => (packs === undefined ? null : <NoPlan placed={placed} />)}</Loaded>
      ) : (
        <Plan stored={stored} />
      )}
      {/* In one place whether there is a plan or not: what is being typed survives the storing of the pack. */}
      {packs === undefined ? null : <CockpitSettingsSection key={placed?.entry.id} placed={placed} stored={stored ?? null} />}
    </>
  );
}

function findAttempt(data: EventsResponse, attemptId: string | undefined, teamId: string): PlacedAttempt | null {
  if (attemptId === undefined) return attemptToPrepare(data.events, teamId);
  const all = data.events.flatMap((event) =>
    event.entries.flatMap((entry) => entry.attempts.map((attempt) => ({ event, entry, attempt }))),
  );
  return all.find(({ attempt }) => attempt.id === attemptId) ?? null;
}

function NoPlan({ placed }: { readonly placed: PlacedAttempt | null }) {
  return (
    <>
      <PageTitle>Plan</PageTitle>
      <EmptyState
        act={placed === null ? <PracticeEventButton /> : <StorePackButton attemptId={placed.attempt.id} again={false} kind="main" />}
      >
        The plan will stand here: elapsed and clock time by checkpoint, planned early or late, and the speed along the course. It is made
        from the pack
        {placed === null ? ', and there is no attempt yet.' : ', and the pack is not on this device yet.'}
      </EmptyState>
    </>
  );
}

function Plan({ stored }: { readonly stored: StoredPack }) {
  const { user, team } = useSignedIn();
  const garage = useQuery(garageQuery(user.id, team.id));
  const { pack } = stored;
  const plan = useMemo(() => planOfPack(pack), [pack]);
  const setup = garage.data?.cars.flatMap((car) => car.wheelSetups).find(({ id }) => id === pack.wheel.setupId);
  const { unit } = pack.courseBook;
  const length = plan.schedule.finish - plan.schedule.start;
  const perUnit = (plan.schedule.targetTime / length) * metresPer(unit);
  const release = pack.attempt.releaseMs;
  return (
    <>
      <PageTitle
        acts={
          <Button className="print:hidden" onClick={() => window.print()}>
            print
          </Button>
        }
      >
        Plan
      </PageTitle>
      <p className="text-quiet -mt-3 mb-6">
        {pack.event.name}, number {pack.entry.number}, attempt {pack.attempt.number}: {pack.courseBook.name}, {pack.raceClass.name}. Pack{' '}
        {stored.digest.slice(0, 8)}.
      </p>
      <p className="font-figure flex flex-wrap gap-x-6 gap-y-1 text-lg font-extrabold md:text-xl">
        <span>release {release === null ? '____:____:____' : dayAndClock(release, pack.event.timeZone)}</span>
        <span>
          {formatDistance(length, unit, 3)} {unit} in {formatDuration(plan.schedule.targetTime, 3)}
        </span>
        <span>
          {roundedDigits(perUnit, 2)} s/{unit}
        </span>
      </p>
      <div className="print:hidden">
        <PlanCharts pack={pack} plan={plan} />
      </div>
      <PlanTable pack={pack} plan={plan} releaseMs={release} />
      <PlanCautions pack={pack} plan={plan} tyre={setup?.tyre ?? null} />
    </>
  );
}
