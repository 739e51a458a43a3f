import { isCommonPassword } from '#server/auth/common-passwords.ts';
import { hashPassword } from '#server/auth/passwords.ts';
import { violatedUnique } from '#server/db/connect.ts';
import { memberships } from '#server/db/schema/memberships.ts';
import { teams } from '#server/db/schema/teams.ts';
import { users } from '#server/db/schema/users.ts';
import { ServiceError } from '#server/service-error.ts';
import type { ServiceContext } from '#server/services/context.ts';
import type { SignUpRequest } from '#shared/api/auth.ts';

/** Makes the person, the team, and the person its manager; signs in. */
export async function signUp(ctx: ServiceContext, request: SignUpRequest): Promise<{ readonly userId: string; readonly token: string }> {
  if (isCommonPassword(request.password) || request.password.toLowerCase() === request.email) {
    throw new ServiceError(
      'PASSWORD_TOO_COMMON',
      'That password is among the first anyone would try. Choose another; three unrelated words are good.',
    );
  }
  const passwordHash = await hashPassword(request.password);
  const userId = await createAccount(ctx, request, passwordHash);
  return { userId, token: await ctx.authSessions.begin(userId) };
}

async function createAccount(ctx: ServiceContext, request: SignUpRequest, passwordHash: string): Promise<string> {
  try {
    return await ctx.db.transaction(async (tx) => {
      const [user] = await tx.insert(users).values({ email: request.email, name: request.name, passwordHash }).returning({ id: users.id });
      const [team] = await tx.insert(teams).values({ name: request.teamName }).returning({ id: teams.id });
      if (!user || !team) throw new Error('insert returned no row');
      await tx.insert(memberships).values({ teamId: team.id, userId: user.id, role: 'manager' });
      return user.id;
    });
  } catch (error) {
    if (violatedUnique(error) !== 'users_email_key') throw error;
    throw new ServiceError('EMAIL_TAKEN', 'There is an account with this address. Sign in instead.');
  }
}
