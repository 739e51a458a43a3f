import { newToken, sha256Hex } from '#server/auth/tokens.ts';
import { packs } from '#server/db/schema/packs.ts';
import { uploadGrants } from '#server/db/schema/upload-grants.ts';
import { ServiceError } from '#server/service-error.ts';
import { requireAttempt } from '#server/services/access/require-attempt.ts';
import { requireUser } from '#server/services/access/require-user.ts';
import { type ServiceContext, within } from '#server/services/context.ts';
import { type PackResponse, packSchema } from '#shared/api/pack.ts';
import { buildPack } from './build-pack.ts';

const GRANT_MS = 30 * 24 * 3600 * 1000;

/** Builds the pack, keeps it under its digest, and hands out leave to upload runs of the entry for 30 days. */
export async function loadPack(ctx: ServiceContext, attemptId: string): Promise<PackResponse> {
  const userId = requireUser(ctx);
  return ctx.db.transaction(async (tx) => {
    const inside = within(ctx, tx);
    const attempt = await requireAttempt(inside, attemptId, 'pack.load');
    const built = await buildPack(inside, attempt);
    if (!built.ok) throw new ServiceError('PACK_NOT_READY', built.error.message, { faults: built.error.faults });
    const { digest, canonical, pack } = built.value;
    await tx.insert(packs).values({ digest, canonical, attemptId }).onConflictDoNothing();
    const grant = newToken();
    const expiresAt = new Date(ctx.now() + GRANT_MS);
    await tx.insert(uploadGrants).values({ tokenHash: sha256Hex(grant), entryId: attempt.entryId, issuedTo: userId, expiresAt });
    return { digest, pack: packSchema.parse(pack), grant, grantExpiresMs: expiresAt.getTime() };
  });
}
