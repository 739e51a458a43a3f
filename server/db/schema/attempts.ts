import { sql } from 'drizzle-orm';
import { check, doublePrecision, foreignKey, integer, pgTable, unique, uuid } from 'drizzle-orm/pg-core';
import { createdAt, id, instant } from './columns.ts';
import { courseBookVersions } from './course-book-versions.ts';
import { entries } from './entries.ts';

/** One go of an entry at a course. */
export const attempts = pgTable(
  'attempts',
  {
    id: id(),
    entryId: uuid('entry_id')
      .notNull()
      .references(() => entries.id),
    number: integer('number').notNull(),
    courseBookId: uuid('course_book_id').notNull(),
    courseBookVersion: integer('course_book_version').notNull(),
    /** Official clock time of the release; null until it is known. */
    releaseAt: instant('release_at'),
    /** Metres the car's nose stands behind the start line. */
    stagedBehindM: doublePrecision('staged_behind_m').notNull().default(0),
    createdAt: createdAt(),
  },
  (t) => [
    // Attempts of an entry are numbered; also lists them in order.
    unique('attempts_entry_id_number_key').on(t.entryId, t.number),
    // Lets a run's foreign key demand that attempt and entry belong together.
    unique('attempts_id_entry_id_key').on(t.id, t.entryId),
    check('attempts_number_from_one', sql`${t.number} >= 1`),
    check('attempts_staged_range', sql`${t.stagedBehindM} between 0 and 200`),
    foreignKey({
      name: 'attempts_course_book_version',
      columns: [t.courseBookId, t.courseBookVersion],
      foreignColumns: [courseBookVersions.courseBookId, courseBookVersions.version],
    }),
  ],
);
