import { desc, eq, type SQL, sql } from 'drizzle-orm';
import { attempts } from '#server/db/schema/attempts.ts';
import { cars } from '#server/db/schema/cars.ts';
import { countingRuns } from '#server/db/schema/counting-runs.ts';
import { courseBooks } from '#server/db/schema/course-books.ts';
import { entries } from '#server/db/schema/entries.ts';
import { events } from '#server/db/schema/events.ts';
import { raceClasses } from '#server/db/schema/race-classes.ts';
import { runResults } from '#server/db/schema/run-results.ts';
import { runs } from '#server/db/schema/runs.ts';
import type { ServiceDeps } from '#server/services/context.ts';
import { type RunSummary, runSummarySchema } from '#shared/api/runs.ts';

/** Runs in short, newest first, with the outcome and finish of their newest result. The caller filters what may be seen. */
export async function runSummaries(deps: Pick<ServiceDeps, 'db'>, where: SQL | undefined): Promise<RunSummary[]> {
  const newest = deps.db
    .selectDistinctOn([runResults.runId], {
      runId: runResults.runId,
      outcome: sql<string>`${runResults.sheet}->>'outcome'`.as('outcome'),
      finish: sql<unknown>`${runResults.sheet}->'finish'`.as('finish'),
    })
    .from(runResults)
    .orderBy(runResults.runId, desc(runResults.computedAt))
    .as('newest');
  const rows = await deps.db
    .select({
      id: runs.id,
      eventId: events.id,
      eventName: events.name,
      timeZone: events.timeZone,
      entryId: entries.id,
      entryNumber: entries.number,
      carName: cars.name,
      attemptId: attempts.id,
      attemptNumber: attempts.number,
      courseBookName: courseBooks.name,
      raceClassName: raceClasses.name,
      deviceId: runs.deviceId,
      practice: runs.practice,
      clockRate: runs.clockRate,
      madeAt: runs.madeAt,
      status: runs.status,
      countingRunId: countingRuns.runId,
      outcome: newest.outcome,
      finish: newest.finish,
    })
    .from(runs)
    .innerJoin(attempts, eq(attempts.id, runs.attemptId))
    .innerJoin(entries, eq(entries.id, runs.entryId))
    .innerJoin(events, eq(events.id, entries.eventId))
    .innerJoin(cars, eq(cars.id, entries.carId))
    .innerJoin(courseBooks, eq(courseBooks.id, attempts.courseBookId))
    .innerJoin(raceClasses, eq(raceClasses.id, entries.raceClassId))
    .leftJoin(countingRuns, eq(countingRuns.attemptId, runs.attemptId))
    .leftJoin(newest, eq(newest.runId, runs.id))
    .where(where)
    .orderBy(desc(runs.madeAt), desc(runs.id));
  return rows.map(({ madeAt, countingRunId, ...row }) =>
    runSummarySchema.parse({ ...row, createdMs: madeAt.getTime(), counts: countingRunId === row.id }),
  );
}
