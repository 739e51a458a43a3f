import { and, desc, eq, exists, or, type SQL, sql } from 'drizzle-orm';
import { attempts } from '#server/db/schema/attempts.ts';
import { courseBookVersions } from '#server/db/schema/course-book-versions.ts';
import { courseBooks } from '#server/db/schema/course-books.ts';
import { entries } from '#server/db/schema/entries.ts';
import { eventMembers } from '#server/db/schema/event-members.ts';
import { memberships } from '#server/db/schema/memberships.ts';
import { ServiceError } from '#server/service-error.ts';
import { requireUser } from '#server/services/access/require-user.ts';
import type { ServiceContext } from '#server/services/context.ts';
import { type CourseBookResponse, courseBookSchema } from '#shared/api/course-book.ts';

/** The newest version of a book, or the one asked for. */
export async function getCourseBook(ctx: ServiceContext, id: string, version: number | null): Promise<CourseBookResponse> {
  const userId = requireUser(ctx);
  const [row] = await ctx.db
    .select({ body: courseBookVersions.body, publishedAt: courseBookVersions.publishedAt })
    .from(courseBookVersions)
    .innerJoin(courseBooks, eq(courseBooks.id, courseBookVersions.courseBookId))
    .where(and(eq(courseBooks.id, id), version === null ? undefined : eq(courseBookVersions.version, version), mayRead(ctx, userId)))
    .orderBy(desc(courseBookVersions.version))
    .limit(1);
  if (!row) throw new ServiceError('NOT_FOUND', 'There is no such course book, or it is not for your team.');
  return { courseBook: courseBookSchema.parse(row.body), publishedMs: row.publishedAt.getTime() };
}

/** Readable by the owner's team, by every team that drives it or is entered in its event, and by the event's officials. */
function mayRead(ctx: ServiceContext, userId: string): SQL | undefined {
  const one = { one: sql`1` };
  const mine = (teamId: typeof courseBooks.ownerTeamId | typeof entries.teamId) =>
    exists(
      ctx.db
        .select(one)
        .from(memberships)
        .where(and(eq(memberships.teamId, teamId), eq(memberships.userId, userId))),
    );
  const enteredOrDriven = ctx.db
    .select(one)
    .from(entries)
    .leftJoin(attempts, eq(attempts.entryId, entries.id))
    .where(and(or(eq(entries.eventId, courseBooks.eventId), eq(attempts.courseBookId, courseBooks.id)), mine(entries.teamId)));
  const official = ctx.db
    .select(one)
    .from(eventMembers)
    .where(and(eq(eventMembers.eventId, courseBooks.eventId), eq(eventMembers.userId, userId)));
  return or(mine(courseBooks.ownerTeamId), exists(enteredOrDriven), exists(official));
}
