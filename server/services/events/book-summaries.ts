import { and, asc, eq, exists, inArray, or, sql } from 'drizzle-orm';
import { attempts } from '#server/db/schema/attempts.ts';
import { courseBookVersions } from '#server/db/schema/course-book-versions.ts';
import { courseBooks } from '#server/db/schema/course-books.ts';
import { entries } from '#server/db/schema/entries.ts';
import type { ServiceContext } from '#server/services/context.ts';

export type BookSummary = Awaited<ReturnType<typeof bookSummaries>>[number];

/** Course book versions that belong to these events, or that attempts in them drive. */
export async function bookSummaries(ctx: ServiceContext, eventIds: readonly string[]) {
  if (eventIds.length === 0) return [];
  const driven = ctx.db
    .select({ one: sql`1` })
    .from(attempts)
    .innerJoin(entries, eq(entries.id, attempts.entryId))
    .where(
      and(
        inArray(entries.eventId, [...eventIds]),
        eq(attempts.courseBookId, courseBookVersions.courseBookId),
        eq(attempts.courseBookVersion, courseBookVersions.version),
      ),
    );
  const rows = await ctx.db
    .select({ version: courseBookVersions, eventId: courseBooks.eventId })
    .from(courseBookVersions)
    .innerJoin(courseBooks, eq(courseBooks.id, courseBookVersions.courseBookId))
    .where(or(inArray(courseBooks.eventId, [...eventIds]), exists(driven)))
    .orderBy(asc(courseBooks.name), asc(courseBookVersions.version));
  return rows.map(({ version: { body, version, courseBookId, lengthM, publishedAt }, eventId }) => ({
    id: courseBookId,
    version,
    eventId,
    name: body.name,
    unit: body.unit,
    lengthM,
    checkpoints: body.checkpoints.length,
    zones: body.zones.length,
    publishedMs: publishedAt.getTime(),
  }));
}
