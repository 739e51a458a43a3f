import { eq } from 'drizzle-orm';
import { entries } from '#server/db/schema/entries.ts';
import { requireEntry } from '#server/services/access/require-entry.ts';
import { type ServiceContext, within } from '#server/services/context.ts';
import type { CockpitSettingsRequest } from '#shared/api/entries.ts';
import type { PlanSettings } from '#shared/course/pack.ts';

/** The crew's choices for every attempt of an entry. Packs already on a tablet keep the old ones until they are stored again. */
export async function setCockpitSettings(
  ctx: ServiceContext,
  entryId: string,
  { reserveS, ...cockpitSettings }: CockpitSettingsRequest,
): Promise<CockpitSettingsRequest> {
  return ctx.db.transaction(async (tx) => {
    await requireEntry(within(ctx, tx), entryId, 'cockpit-settings.set');
    const [row] = await tx.select({ planSettings: entries.planSettings }).from(entries).where(eq(entries.id, entryId)).for('update');
    if (!row) throw new Error('an entry without its row');
    const planSettings = withReserve(row.planSettings, reserveS);
    await tx.update(entries).set({ cockpitSettings, planSettings }).where(eq(entries.id, entryId));
    return cockpitSettingsOf({ cockpitSettings, planSettings });
  });
}

export const cockpitSettingsOf = ({
  cockpitSettings,
  planSettings,
}: Pick<typeof entries.$inferSelect, 'cockpitSettings' | 'planSettings'>): CockpitSettingsRequest => ({
  ...cockpitSettings,
  reserveS: planSettings.reserveS ?? 0,
});

/** No reserve is left out, so that a plan set back to none gives the pack it gave before. */
function withReserve({ reserveS: _before, ...plan }: PlanSettings, reserveS: number): PlanSettings {
  return reserveS > 0 ? { ...plan, reserveS } : plan;
}
