import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Link, useParams, useSearchParams } from 'react-router';
import type { EventsResponse } from '#shared/api/events.ts';
import { eventsQuery } from '#src/api/events/get-events.ts';
import { Cautions } from '#src/components/cautions.tsx';
import { EmptyState } from '#src/components/empty-state.tsx';
import { PageTitle } from '#src/components/page-title.tsx';
import { usePacks } from '#src/paddock/device/use-stored.ts';
import { Loaded } from '#src/paddock/parts/loaded.tsx';
import { formatDate } from '#src/paddock/parts/when.ts';
import { useSignedIn } from '#src/paddock/signed-in.tsx';
import { AttemptSection } from './attempt-section.tsx';
import { AttemptTable } from './attempt-table.tsx';
import { attemptToPrepare, type EventData, placedAttempts } from './next-thing.ts';
import { NextThingField } from './next-thing-field.tsx';
import { PracticeEventButton } from './practice-event-button.tsx';

export function EventPage() {
  const { user, team } = useSignedIn();
  const events = useQuery(eventsQuery(user.id, team.id));
  return <Loaded query={events}>{(data) => <Events data={data} />}</Loaded>;
}

function Events({ data }: { readonly data: EventsResponse }) {
  const { team } = useSignedIn();
  const { eventId } = useParams();
  const near = attemptToPrepare(data.events, team.id);
  const event = data.events.find(({ id }) => id === eventId) ?? near?.event ?? data.events[0];
  if (event === undefined) return <NoEvent />;
  return (
    <>
      <PageTitle>{event.name}</PageTitle>
      <p className="text-quiet -mt-3 mb-6">
        {event.place}, {formatDate(event.startsOn)}
        {event.endsOn === event.startsOn ? '' : ` to ${formatDate(event.endsOn)}`}. Clock times are {event.timeZone}.
        {event.practice ? ' Made for practice: nothing of it is official.' : ''}
      </p>
      <Attempts key={event.id} event={event} />
      <OtherEvents events={data.events.filter(({ id }) => id !== event.id)} />
    </>
  );
}

function Attempts({ event }: { readonly event: EventData }) {
  const { team } = useSignedIn();
  const [search, setSearch] = useSearchParams();
  const [editing, setEditing] = useState<string | null>(null);
  const packs = usePacks();
  const packOf = (attemptId: string) => packs?.find((pack) => pack.attemptId === attemptId) ?? null;
  const attempts = placedAttempts([event], team.id);
  const placed = attempts.find(({ attempt }) => attempt.id === search.get('attempt')) ?? attemptToPrepare([event], team.id);
  if (placed === null) return <EmptyState>Your entries to this event will stand here, with their releases and packs.</EmptyState>;
  const { attempt } = placed;
  // A new release may change which attempt comes next; the one in hand stays.
  const edit = (on: boolean) => {
    setSearch({ attempt: attempt.id }, { replace: true });
    setEditing(on ? attempt.id : null);
  };
  return (
    <>
      <NextThingField placed={placed} pack={packOf(attempt.id)} editRelease={() => edit(true)} />
      <div className="grid gap-x-12 lg:grid-cols-[2fr_1fr]">
        <AttemptSection placed={placed} pack={packOf(attempt.id)} editing={editing === attempt.id} setEditing={edit} />
        <aside aria-labelledby="event-cautions" className="mb-10">
          <h2 id="event-cautions" className="mb-2 text-xl font-bold">
            Cautions
          </h2>
          <Cautions />
        </aside>
      </div>
      <h2 className="mb-2 text-xl font-bold">All attempts</h2>
      <AttemptTable attempts={attempts} chosen={attempt.id} packOf={packOf} />
    </>
  );
}

function OtherEvents({ events }: { readonly events: readonly EventData[] }) {
  if (events.length === 0) return null;
  return (
    <section className="mt-10">
      <h2 className="mb-2 text-xl font-bold">Other events</h2>
      <ul>
        {events.map((event) => (
          <li key={event.id} className="border-hair border-b py-2">
            <Link className="underline underline-offset-4" to={`/event/${event.id}`}>
              {event.name}
            </Link>
            <span className="text-quiet">
              , {event.place}, {formatDate(event.startsOn)}
              {event.practice ? ', practice' : ''}
            </span>
          </li>
        ))}
      </ul>
    </section>
  );
}

function NoEvent() {
  return (
    <>
      <PageTitle>Event</PageTitle>
      <EmptyState act={<PracticeEventButton />}>
        Your events will stand here: entries, releases, and the one thing to do next. A practice event brings an invented course, car and
        attempt, to try everything from the pack to the run sheet at a desk.
      </EmptyState>
    </>
  );
}
