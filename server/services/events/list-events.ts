import { asc, desc, eq, inArray, or } from 'drizzle-orm';
import { entries } from '#server/db/schema/entries.ts';
import { events } from '#server/db/schema/events.ts';
import { raceClasses } from '#server/db/schema/race-classes.ts';
import { teams } from '#server/db/schema/teams.ts';
import { requireTeam } from '#server/services/access/require-team.ts';
import type { ServiceContext } from '#server/services/context.ts';
import { raceClassOf } from '#server/services/packs/race-class-of.ts';
import { type EventsResponse, eventsResponseSchema } from '#shared/api/events.ts';
import { CAUTIONS } from '#shared/cautions.ts';
import { type BookSummary, bookSummaries } from './book-summaries.ts';
import { type EntryView, entriesOf } from './entries-of.ts';

/** The events a team owns or is entered in, with all that its event page needs to say what is to be done next. */
export async function listEvents(ctx: ServiceContext, teamId: string): Promise<EventsResponse> {
  const access = await requireTeam(ctx, teamId, 'events.read');
  const entered = ctx.db.select({ id: entries.eventId }).from(entries).where(eq(entries.teamId, teamId));
  const rows = await ctx.db
    .select({ event: events, owner: { id: teams.id, name: teams.name } })
    .from(events)
    .innerJoin(teams, eq(teams.id, events.ownerTeamId))
    .where(or(eq(events.ownerTeamId, teamId), inArray(events.id, entered)))
    .orderBy(desc(events.startsOn), asc(events.name));
  const ids = rows.map((row) => row.event.id);
  const classes =
    ids.length === 0 ? [] : await ctx.db.select().from(raceClasses).where(inArray(raceClasses.eventId, ids)).orderBy(asc(raceClasses.name));
  const books = await bookSummaries(ctx, ids);
  const entryViews = await entriesOf(ctx, access, ids, books);
  return eventsResponseSchema.parse({
    nowMs: ctx.now(),
    cautions: CAUTIONS,
    events: rows.map(({ event, owner }) => ({
      ...event,
      owner,
      raceClasses: classes.filter((row) => row.eventId === event.id).map(raceClassOf),
      courseBooks: booksOf(event.id, books, entryViews),
      entries: entryViews.filter((entry) => entry.eventId === event.id),
    })),
  });
}

/** The event's books and those its attempts drive, each once. */
function booksOf(eventId: string, books: readonly BookSummary[], entryViews: readonly EntryView[]): BookSummary[] {
  const driven = new Set(
    entryViews.filter((entry) => entry.eventId === eventId).flatMap((entry) => entry.attempts.map(({ courseBook }) => keyOf(courseBook))),
  );
  return books.filter((book) => book.eventId === eventId || driven.has(keyOf(book)));
}

const keyOf = (book: { readonly id: string; readonly version: number }): string => `${book.id}/${book.version}`;
