import { ServiceError } from '#server/service-error.ts';
import type { ServiceContext } from '#server/services/context.ts';

/** @returns the id of the person signed in. */
export function requireUser(ctx: ServiceContext): string {
  if (ctx.actor.kind !== 'user') throw new ServiceError('SIGN_IN_REQUIRED', 'Sign in first.');
  return ctx.actor.userId;
}
