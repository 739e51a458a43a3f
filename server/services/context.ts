import type { Actor } from '#server/auth/actor.ts';
import type { AuthSessions } from '#server/auth/auth-sessions.ts';
import type { Database } from '#server/db/connect.ts';

/** What every verb is given: who asks, and the means to answer. */
export interface ServiceContext extends ServiceDeps {
  readonly actor: Actor;
}

export interface ServiceDeps {
  readonly db: Database;
  readonly authSessions: AuthSessions;
  /** Official clock of this server, unix ms. */
  readonly now: () => number;
  /** Asks for the replay of a sealed run; returns once asked. A lost call is made good at the next start. */
  readonly askReplay: (runId: string) => Promise<void>;
}

/** The same caller inside a transaction. */
export const within = (ctx: ServiceContext, db: Database): ServiceContext => ({ ...ctx, db });
