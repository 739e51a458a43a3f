import { eq } from 'drizzle-orm';
import { passwordMatches } from '#server/auth/passwords.ts';
import { users } from '#server/db/schema/users.ts';
import { ServiceError } from '#server/service-error.ts';
import type { ServiceContext } from '#server/services/context.ts';
import type { SignInRequest } from '#shared/api/auth.ts';
import { attemptOf, countAsFailed, forgive } from './sign-in-limits.ts';

/** @returns the token for the cookie. Unknown address and wrong password: the same answer after the same work. */
export async function signIn(
  ctx: ServiceContext,
  request: SignInRequest,
  address: string,
): Promise<{ readonly userId: string; readonly token: string }> {
  const attempt = attemptOf(request.email, address);
  await countAsFailed(ctx, attempt);
  const [user] = await ctx.db.select({ id: users.id, passwordHash: users.passwordHash }).from(users).where(eq(users.email, request.email));
  const matches = await passwordMatches(user?.passwordHash ?? null, request.password);
  if (!user || !matches) throw new ServiceError('SIGN_IN_FAILED', 'Address and password do not belong together. Check both and try again.');
  await forgive(ctx, attempt);
  return { userId: user.id, token: await ctx.authSessions.begin(user.id) };
}
