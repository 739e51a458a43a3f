import { sql } from 'drizzle-orm';
import type { ServiceContext } from '#server/services/context.ts';

/** Resolves when the database answers. */
export async function checkDatabase(ctx: ServiceContext): Promise<void> {
  await ctx.db.execute(sql`select 1`);
}
