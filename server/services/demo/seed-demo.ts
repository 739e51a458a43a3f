import { sql } from 'drizzle-orm';
import { users } from '#server/db/schema/users.ts';
import type { ServiceDeps } from '#server/services/context.ts';
import type { Replay } from '#server/services/runs/compute-result.ts';
import { CREW_TEAM, DEMO_PASSWORD, ORGANISER_TEAM } from './demo-cast.ts';
import { seedEvent } from './seed-event.ts';
import { seedPeople } from './seed-people.ts';
import { seedRuns } from './seed-runs.ts';

/** Any fixed number: two processes that start together seed once. */
const LOCK = 7_301_987;

/** Fills an empty database with the demo, all of it or nothing. @returns false where there are people already. */
export async function seedDemo(deps: ServiceDeps, drive: { readonly replay: Replay; readonly appVersion: string }): Promise<boolean> {
  return deps.db.transaction(async (tx) => {
    await tx.execute(sql`select pg_advisory_xact_lock(${LOCK})`);
    const present = await tx.select({ id: users.id }).from(users).limit(1);
    if (present.length > 0) return false;
    const ctx = { ...deps, db: tx, actor: { kind: 'anonymous' as const } };
    const people = await seedPeople(ctx);
    const entries = await seedEvent(ctx, people);
    await seedRuns(ctx, people, entries, drive);
    return true;
  });
}

/** What to tell whoever starts the server; null where the demo is not in this database. */
export async function demoNotes(deps: Pick<ServiceDeps, 'db'>): Promise<string | null> {
  const rows = await deps.db.select({ email: users.email }).from(users);
  const known = new Set(rows.map((row) => row.email));
  const lines = [
    ...CREW_TEAM.members.map(({ email, role }) => ({ email, what: `${role}, ${CREW_TEAM.name}` })),
    ...ORGANISER_TEAM.members.map(({ email, office }) => ({ email, what: `${office}, ${ORGANISER_TEAM.name}` })),
  ].filter(({ email }) => known.has(email));
  if (lines.length === 0) return null;
  const width = Math.max(...lines.map(({ email }) => email.length));
  return [`Demo accounts, password ${DEMO_PASSWORD}:`, ...lines.map(({ email, what }) => `  ${email.padEnd(width)}  ${what}`)].join('\n');
}
