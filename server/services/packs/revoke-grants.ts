import { and, eq, isNull } from 'drizzle-orm';
import { uploadGrants } from '#server/db/schema/upload-grants.ts';
import { requireEntry } from '#server/services/access/require-entry.ts';
import type { ServiceContext } from '#server/services/context.ts';

/** Ends every upload grant of an entry, for a tablet that was lost. @returns how many were alive. */
export async function revokeGrants(ctx: ServiceContext, entryId: string): Promise<number> {
  await requireEntry(ctx, entryId, 'pack.load');
  const revoked = await ctx.db
    .update(uploadGrants)
    .set({ revokedAt: new Date(ctx.now()) })
    .where(and(eq(uploadGrants.entryId, entryId), isNull(uploadGrants.revokedAt)))
    .returning({ id: uploadGrants.id });
  return revoked.length;
}
