import { and, eq, max } from 'drizzle-orm';
import { courseBookVersions } from '#server/db/schema/course-book-versions.ts';
import { courseBooks } from '#server/db/schema/course-books.ts';
import { ServiceError } from '#server/service-error.ts';
import { requireTeam } from '#server/services/access/require-team.ts';
import { type ServiceContext, within } from '#server/services/context.ts';
import { type CourseBookResponse, courseBookSchema, type PublishCourseBookRequest } from '#shared/api/course-book.ts';
import { checkCourseBook } from '#shared/course/check.ts';
import { printedMetres } from '#shared/course/convert.ts';
import type { CourseBook } from '#shared/course/course-book.ts';

/** Publishes a new book, or the next version of one of the team's. A published version never changes. */
export async function publishCourseBook(
  ctx: ServiceContext,
  teamId: string,
  request: PublishCourseBookRequest,
): Promise<CourseBookResponse> {
  const { userId } = await requireTeam(ctx, teamId, 'course-book.publish');
  const { courseBookId, ...content } = request;
  return ctx.db.transaction(async (tx) => {
    const inside = within(ctx, tx);
    const id =
      courseBookId === null
        ? await createBook(inside, { teamId, eventId: null, name: request.name })
        : await lockBook(inside, teamId, courseBookId);
    return publishVersion(inside, id, userId, content);
  });
}

export type CourseContent = Omit<CourseBook, 'id' | 'version'>;

/** The caller has been let through already, and holds the book's row or has just made it. */
export async function publishVersion(ctx: ServiceContext, id: string, userId: string, content: CourseContent): Promise<CourseBookResponse> {
  const courseBook = courseBookSchema.parse({ ...content, id, version: await nextVersion(ctx, id) });
  const lengthM = checkedLength(courseBook);
  const publishedAt = new Date(ctx.now());
  await ctx.db
    .insert(courseBookVersions)
    .values({ courseBookId: id, version: courseBook.version, body: courseBook, lengthM, publishedBy: userId, publishedAt });
  return { courseBook, publishedMs: publishedAt.getTime() };
}

interface NewBook {
  readonly teamId: string;
  readonly eventId: string | null;
  readonly name: string;
}

/** A book without a version yet. */
export async function createBook(ctx: ServiceContext, { teamId, eventId, name }: NewBook): Promise<string> {
  const [book] = await ctx.db.insert(courseBooks).values({ ownerTeamId: teamId, eventId, name }).returning({ id: courseBooks.id });
  if (!book) throw new Error('insert returned no row');
  return book.id;
}

/** Holds the book's row, so that two publishers get two versions. */
async function lockBook(ctx: ServiceContext, teamId: string, id: string): Promise<string> {
  const [book] = await ctx.db
    .select({ id: courseBooks.id })
    .from(courseBooks)
    .where(and(eq(courseBooks.id, id), eq(courseBooks.ownerTeamId, teamId)))
    .for('update');
  if (!book) throw new ServiceError('NOT_FOUND', 'There is no such course book, or it is not your team’s.');
  return book.id;
}

async function nextVersion(ctx: ServiceContext, id: string): Promise<number> {
  const [row] = await ctx.db
    .select({ newest: max(courseBookVersions.version) })
    .from(courseBookVersions)
    .where(eq(courseBookVersions.courseBookId, id));
  return (row?.newest ?? 0) + 1;
}

/** Metres from start to finish. @throws ServiceError COURSE_BOOK_INVALID with every fault, each with its place. */
function checkedLength(courseBook: CourseBook): number {
  const faults = checkCourseBook(courseBook).filter((fault) => fault.severity === 'error');
  const [first, ...others] = faults;
  if (first) {
    const more = others.length === 0 ? '' : ` There are ${others.length} more faults.`;
    throw new ServiceError('COURSE_BOOK_INVALID', `${first.where}: ${first.message}${more}`, {
      faults: faults.map(({ code, where, message }) => ({ code, where, message })),
    });
  }
  const finish = courseBook.checkpoints.find((checkpoint) => checkpoint.duty === 'finish');
  if (!finish) throw new Error('a book without a finish passed its checks');
  return printedMetres(finish.at);
}
