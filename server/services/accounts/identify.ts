import { and, eq, gt, isNull } from 'drizzle-orm';
import { type Actor, ANONYMOUS } from '#server/auth/actor.ts';
import { sha256Hex } from '#server/auth/tokens.ts';
import { uploadGrants } from '#server/db/schema/upload-grants.ts';
import { ServiceError } from '#server/service-error.ts';
import type { ServiceDeps } from '#server/services/context.ts';

/** The person behind a sign-in cookie's token, or nobody. */
export async function identifyByCookie(deps: ServiceDeps, token: string | null): Promise<Actor> {
  const person = token === null ? null : await deps.authSessions.check(token);
  return person === null ? ANONYMOUS : { kind: 'user', userId: person.userId };
}

/** The entry behind an upload grant. @throws ServiceError GRANT_INVALID where it is unknown, run out or revoked. */
export async function identifyByGrant(deps: ServiceDeps, token: string | null): Promise<Actor> {
  const [grant] =
    token === null
      ? []
      : await deps.db
          .select({ id: uploadGrants.id, entryId: uploadGrants.entryId, userId: uploadGrants.issuedTo })
          .from(uploadGrants)
          .where(
            and(
              eq(uploadGrants.tokenHash, sha256Hex(token)),
              isNull(uploadGrants.revokedAt),
              gt(uploadGrants.expiresAt, new Date(deps.now())),
            ),
          );
  if (!grant)
    throw new ServiceError(
      'GRANT_INVALID',
      'This tablet’s upload grant has run out or was revoked. Sign in on it, or load the course again.',
    );
  return { kind: 'grant', grantId: grant.id, entryId: grant.entryId, userId: grant.userId };
}
