import { hash, verify } from '@node-rs/argon2';
import { ServiceError } from '#server/service-error.ts';
import { createGate } from './gate.ts';

/**
 * argon2id (the package's own default), m = 64 MiB, t = 3, p = 1: above the floor of the OWASP Password Storage Cheat Sheet (19 MiB, t = 2, p = 1).
 * Each costs 64 MiB while it runs, so four at most run at once.
 */
const COST = { memoryCost: 64 * 1024, timeCost: 3, parallelism: 1 } as const;
const gate = createGate(4, 32);

/** What a missing account is checked against, so that it takes the same work as a present one. */
const noAccount = hash('no account has this password', COST);
noAccount.catch(() => undefined);

function guarded<T>(task: () => Promise<T>): Promise<T> {
  const result = gate.run(task);
  if (result === null)
    throw new ServiceError('BUSY', 'Too many people are signing in at once. Try again in a few seconds.', { retryAfterS: 5 });
  return result;
}

export const hashPassword = async (password: string): Promise<string> => guarded(() => hash(password, COST));

/** False for a wrong password and, after the same work, for a missing account (`stored` null). */
export async function passwordMatches(stored: string | null, password: string): Promise<boolean> {
  const against = stored ?? (await noAccount);
  const matches = await guarded(() => verify(against, password));
  return matches && stored !== null;
}
