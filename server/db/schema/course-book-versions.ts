import { sql } from 'drizzle-orm';
import { check, doublePrecision, integer, jsonb, pgTable, primaryKey, uuid } from 'drizzle-orm/pg-core';
import type { CourseBook } from '#shared/course/course-book.ts';
import { instant } from './columns.ts';
import { courseBooks } from './course-books.ts';
import { users } from './users.ts';

/**
 * A course book as published: checkpoints with duties, zones, what comes after the finish. Never changes; a trigger
 * (see the migrations) refuses updates and deletions.
 */
export const courseBookVersions = pgTable(
  'course_book_versions',
  {
    courseBookId: uuid('course_book_id')
      .notNull()
      .references(() => courseBooks.id),
    version: integer('version').notNull(),
    /** The whole book as `courseBookSchema` has it, distances as printed. */
    body: jsonb('body').$type<CourseBook>().notNull(),
    /** Start to finish, metres. */
    lengthM: doublePrecision('length_m').notNull(),
    publishedBy: uuid('published_by').references(() => users.id),
    publishedAt: instant('published_at').notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.courseBookId, t.version] }),
    check('course_book_versions_from_one', sql`${t.version} >= 1`),
    check('course_book_versions_length', sql`${t.lengthM} > 0`),
    check(
      'course_book_versions_body_agrees',
      sql`${t.body}->>'id' = ${t.courseBookId}::text and (${t.body}->>'version')::int = ${t.version}`,
    ),
  ],
);
