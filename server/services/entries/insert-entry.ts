import { attempts } from '#server/db/schema/attempts.ts';
import { entries } from '#server/db/schema/entries.ts';
import { entryCrew } from '#server/db/schema/entry-crew.ts';
import type { ServiceContext } from '#server/services/context.ts';
import type { MemberRole } from '#shared/api/auth.ts';
import type { CockpitSettings, PlanSettings } from '#shared/course/pack.ts';

export interface NewEntry {
  readonly eventId: string;
  readonly teamId: string;
  readonly carId: string;
  readonly wheelSetupId: string;
  readonly raceClassId: string;
  readonly number: string;
  readonly planSettings: PlanSettings;
  readonly cockpitSettings: CockpitSettings;
  readonly crew: readonly { readonly userId: string; readonly role: MemberRole }[];
  readonly attempts: readonly NewAttempt[];
}

export interface NewAttempt {
  readonly courseBookId: string;
  readonly courseBookVersion: number;
  readonly releaseAt: Date | null;
  readonly stagedBehindM: number;
}

/** An entry with its crew and attempts, numbered from 1. The caller has been let through already. */
export async function insertEntry(
  ctx: ServiceContext,
  entry: NewEntry,
): Promise<{ readonly entryId: string; readonly attemptIds: readonly string[] }> {
  const { crew, attempts: goes, ...columns } = entry;
  const [row] = await ctx.db.insert(entries).values(columns).returning({ id: entries.id });
  if (!row) throw new Error('insert returned no row');
  const { teamId } = entry;
  await ctx.db.insert(entryCrew).values(crew.map((member) => ({ entryId: row.id, teamId, ...member })));
  const attemptRows = await ctx.db
    .insert(attempts)
    .values(goes.map((go, i) => ({ entryId: row.id, number: i + 1, ...go })))
    .returning({ id: attempts.id, number: attempts.number });
  const attemptIds = attemptRows.sort((a, b) => a.number - b.number).map((attempt) => attempt.id);
  return { entryId: row.id, attemptIds };
}

/** How a crew that has said nothing yet is set up. Common practice, no source. */
export const USUAL_PLAN: PlanSettings = { acceleration: 2.5, deceleration: 4, capMargin: 0.02 };
/**
 * The estimator judges distance, scale, tyres and lead together; the simple rules stay as choices. A navigator's lead is
 * learnt, so it begins at nothing and counts as unlearnt: nothing is said of how well it is known. Own simulations of long
 * runs, no outside source.
 */
export const USUAL_COCKPIT: CockpitSettings = {
  speedUnit: 'km/h',
  scaleRule: 'estimator',
  tapLeadMs: { glass: 0, wired: 0 },
  tapScatterMs: 100,
  buttonSide: 'right',
};
