import { desc, eq } from 'drizzle-orm';
import { attempts } from '#server/db/schema/attempts.ts';
import { runResults } from '#server/db/schema/run-results.ts';
import { wheelScales } from '#server/db/schema/wheel-scales.ts';
import type { ServiceContext } from '#server/services/context.ts';
import { setCountingRun } from '#server/services/entries/set-counting-run.ts';
import type { Replay } from '#server/services/runs/compute-result.ts';
import type { DemoEntry } from './seed-event.ts';
import type { DemoPeople } from './seed-people.ts';
import { type DemoRun, uploadRun } from './upload-run.ts';

interface Script extends Pick<DemoRun, 'seed' | 'forgets' | 'redFlagAfterS'> {
  /** Which attempt, from 0. */
  readonly attempt: number;
  /** Released that much later than the attempt says: a rerun. */
  readonly laterMs: number;
  readonly counts: boolean;
}

const clean = { forgets: null, redFlagAfterS: null, laterMs: 0, counts: true };
const RERUN_LATER_MS = 105 * 60_000;

/** Yesterday: one car out and back, with a place missed on the way home; the other flagged down, rerun, then back. */
const SCRIPTS: readonly (readonly Script[])[] = [
  [
    { ...clean, attempt: 0, seed: 1107 },
    { ...clean, attempt: 1, seed: 1108, forgets: 'own-chapel' },
  ],
  [
    { ...clean, attempt: 0, seed: 1201, redFlagAfterS: 720, counts: false },
    { ...clean, attempt: 0, seed: 1202, laterMs: RERUN_LATER_MS },
    { ...clean, attempt: 1, seed: 1203 },
  ],
];

export async function seedRuns(
  ctx: ServiceContext,
  people: DemoPeople,
  entries: readonly DemoEntry[],
  drive: { readonly replay: Replay; readonly appVersion: string },
): Promise<void> {
  for (const [i, entry] of entries.entries()) {
    const navigator: ServiceContext = { ...ctx, actor: { kind: 'user', userId: people.userId(entry.car.navigator) } };
    let lastRunId = '';
    for (const script of SCRIPTS[i] ?? []) {
      const { attempt, laterMs, counts, ...rest } = script;
      const attemptId = entry.attemptIds[attempt] ?? '';
      if (laterMs !== 0) await releaseLater(ctx, attemptId, laterMs);
      const deviceId = `tablet-${entry.car.name.toLowerCase()}`;
      lastRunId = await uploadRun(navigator, { ...rest, attemptId, deviceId, appVersion: drive.appVersion }, drive.replay);
      if (counts) await setCountingRun(navigator, entry.entryId, lastRunId);
    }
    await keepScale(ctx, entry.wheelSetupId, lastRunId);
  }
}

/** The office orders a rerun: the attempt gets its new release. */
async function releaseLater(ctx: ServiceContext, attemptId: string, laterMs: number): Promise<void> {
  const [row] = await ctx.db.select({ releaseAt: attempts.releaseAt }).from(attempts).where(eq(attempts.id, attemptId));
  if (!row?.releaseAt) throw new Error('a rerun needs a first release');
  const releaseAt = new Date(row.releaseAt.getTime() + laterMs);
  await ctx.db.update(attempts).set({ releaseAt }).where(eq(attempts.id, attemptId));
}

/** The crew carries the scale of its last run over to tomorrow. */
async function keepScale(ctx: ServiceContext, wheelSetupId: string, runId: string): Promise<void> {
  const [result] = await ctx.db
    .select({ sheet: runResults.sheet })
    .from(runResults)
    .where(eq(runResults.runId, runId))
    .orderBy(desc(runResults.computedAt))
    .limit(1);
  const last = result?.sheet.legs.findLast((leg) => leg.by === 'tap' && leg.scaleKept === null);
  if (!last) throw new Error('a demo run corrected no wheel scale');
  await ctx.db.insert(wheelScales).values({
    wheelSetupId,
    mmPerPulse: Number(last.scaleAfter.toFixed(4)),
    scaleSigma: 0.001,
    source: 'run',
    runId,
    note: `Scale at ${last.name}, tyres hot`,
    recordedAt: new Date(ctx.now()),
  });
}
