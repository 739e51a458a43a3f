import { DrizzlePostgreSQLAdapter } from '@lucia-auth/adapter-drizzle';
import { Lucia, TimeSpan } from 'lucia';
import type { Connection } from '#server/db/connect.ts';
import { authSessions } from '#server/db/schema/auth-sessions.ts';
import { users } from '#server/db/schema/users.ts';
import { newToken, sha256Hex } from './tokens.ts';

/**
 * Sign-ins: the only module that knows Lucia, so that it can be replaced. Lucia is given the hash of the cookie's token and
 * never the token; its own cookies are not used. The idle limit is Lucia's, the absolute limit our own column.
 */
export interface AuthSessions {
  /** Begins a sign-in and returns the token for the cookie. */
  begin(userId: string): Promise<string>;
  /** The person behind a token; null where it is unknown, idle too long, or older than the absolute limit. */
  check(token: string): Promise<{ readonly userId: string } | null>;
  end(token: string): Promise<void>;
  endAll(userId: string): Promise<void>;
  /** Removes those that were idle too long. */
  sweep(): Promise<void>;
}

declare module 'lucia' {
  interface Register {
    Lucia: Lucia<{ absoluteExpiresAt: Date }>;
    DatabaseSessionAttributes: { absoluteExpiresAt: Date };
  }
}

const IDLE = new TimeSpan(30, 'd');
export const ABSOLUTE_MS = 90 * 24 * 3600 * 1000;

export function createAuthSessions(db: Connection['db'], now: () => number): AuthSessions {
  const lucia = new Lucia(new DrizzlePostgreSQLAdapter(db, authSessions, users), {
    sessionExpiresIn: IDLE,
    getSessionAttributes: (row) => ({ absoluteExpiresAt: row.absoluteExpiresAt }),
  });

  return {
    async begin(userId) {
      const token = newToken();
      const attributes = { absoluteExpiresAt: new Date(now() + ABSOLUTE_MS) };
      await lucia.createSession(userId, attributes, { sessionId: sha256Hex(token) });
      return token;
    },
    async check(token) {
      const id = sha256Hex(token);
      const { session: authSession } = await lucia.validateSession(id);
      if (!authSession) return null;
      if (authSession.absoluteExpiresAt.getTime() <= now()) {
        await lucia.invalidateSession(id);
        return null;
      }
      return { userId: authSession.userId };
    },
    end: (token) => lucia.invalidateSession(sha256Hex(token)),
    endAll: (userId) => lucia.invalidateUserSessions(userId),
    sweep: () => lucia.deleteExpiredSessions(),
  };
}
