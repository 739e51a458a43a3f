/**
 * The import directions as the design says them, written down a second time by hand, so that a slip in the matrix itself
 * is seen too.
 */
type Verdict = 'allowed' | 'forbidden';

interface DesignPair {
  readonly importer: string;
  readonly target: string;
  readonly verdict: Verdict;
}

function pairs(verdict: Verdict, importers: readonly string[], targets: readonly string[]): DesignPair[] {
  return importers.flatMap((importer) => targets.map((target) => ({ importer, target, verdict })));
}

const SHARED = ['course', 'pace', 'sensor', 'journal', 'drive', 'api'].map((room) => `shared/${room}/planted.ts`);
const SERVER = ['db', 'auth', 'routes', 'services', 'jobs', 'mail'].map((room) => `server/${room}/planted.ts`);
const SRC = ['paddock', 'cockpit', 'components', 'run', 'sensors', 'storage', 'sync', 'api'].map((room) => `src/${room}/planted.ts`);
const names = (paths: readonly string[]) => paths.map((path) => `#${path}`);
const except = (paths: readonly string[], ...rooms: string[]) => paths.filter((path) => !rooms.some((room) => path.includes(`/${room}/`)));

/** The sentence, and what it allows and forbids. */
export const DESIGN: Readonly<Record<string, readonly DesignPair[]>> = {
  'shared imports nobody; the two sides do not know each other.': [
    ...pairs('forbidden', SHARED, [...names(SERVER), ...names(SRC), 'react', 'node:fs', 'dexie', 'drizzle-orm', 'express']),
    ...pairs('forbidden', SERVER, names(SRC)),
    ...pairs('forbidden', SRC, names(SERVER)),
    ...pairs('allowed', ['server/services/planted.ts', 'src/run/planted.ts'], ['#shared/pace/run.ts', '#shared/journal/block.ts']),
  ],
  'The engine imports units, results, course and journal types only.': [
    ...pairs('allowed', ['shared/pace/planted.ts'], ['#shared/units.ts', '#shared/result.ts', '#shared/course/pack.ts']),
    ...pairs('allowed', ['shared/pace/planted.ts'], ['#shared/journal/observation.ts', '#shared/journal/run-header.ts', './odometer.ts']),
    ...pairs(
      'forbidden',
      ['shared/pace/planted.ts'],
      ['#shared/journal/block.ts', '#shared/sensor/sentence-reader.ts', '#shared/api/runs.ts', 'zod'],
    ),
    ...pairs('allowed', ['shared/journal/planted.ts'], ['#shared/pace/run.ts']),
    ...pairs('forbidden', except(SHARED, 'api'), ['zod', '#shared/api/runs.ts']),
  ],
  'One package, one keeper.': [
    ...pairs('forbidden', except(SRC, 'storage'), ['dexie']),
    ...pairs('allowed', ['src/storage/planted.ts'], ['dexie']),
    ...pairs('forbidden', except(SERVER, 'db', 'services'), ['drizzle-orm', 'drizzle-orm/pg-core']),
    ...pairs('allowed', ['server/db/planted.ts', 'server/services/planted.ts'], ['drizzle-orm', 'drizzle-orm/pg-core']),
  ],
  'routes -> services -> db, with auth and jobs allowed db.': [
    ...pairs('forbidden', ['server/routes/planted.ts'], ['#server/db/pool.ts', 'pg']),
    ...pairs('allowed', ['server/routes/planted.ts'], ['#server/services/runs/seal.ts']),
    ...pairs('allowed', except(SERVER, 'routes', 'mail'), ['#server/db/pool.ts']),
    ...pairs('forbidden', except(SERVER, 'routes'), ['#server/routes/runs.ts']),
    ...pairs('forbidden', ['server/db/planted.ts'], ['#server/services/runs/seal.ts', '#server/auth/roles.ts']),
  ],
  'The cockpit carries no router, Query, forms or zod, and the paddock and the cockpit do not know each other.': [
    ...pairs(
      'forbidden',
      ['src/cockpit/planted.ts'],
      ['react-router', '@tanstack/react-query', 'react-hook-form', '@hookform/resolvers/zod', 'zod'],
    ),
    ...pairs('forbidden', ['src/cockpit/planted.ts'], ['#src/paddock/page.tsx', '#src/api/runs/get-run.ts', '#shared/api/runs.ts']),
    ...pairs('forbidden', ['src/paddock/planted.ts'], ['#src/cockpit/cockpit.tsx']),
    ...pairs('allowed', ['src/planted.tsx'], ['./paddock/paddock.tsx', './cockpit/cockpit.tsx']),
  ],
  'What the cockpit reaches must be as light.': [
    ...pairs('forbidden', except(SRC, 'paddock', 'api'), ['zod', '@tanstack/react-query', 'react-router', '#shared/api/runs.ts']),
  ],
  'paddock|cockpit -> run|api|components -> sync -> storage|sensors -> shared.': [
    ...pairs('forbidden', except(SRC, 'paddock', 'cockpit'), ['#src/paddock/page.tsx', '#src/cockpit/cockpit.tsx']),
    ...pairs('forbidden', ['src/storage/planted.ts', 'src/sensors/planted.ts'], names(except(SRC, 'storage', 'sensors'))),
    ...pairs('forbidden', ['src/storage/planted.ts'], ['#src/sensors/serial-source.ts']),
    ...pairs('forbidden', ['src/sensors/planted.ts'], ['#src/storage/journal-store.ts']),
    ...pairs('forbidden', ['src/sync/planted.ts'], ['#src/run/run-session.ts', '#src/api/client.ts', '#src/components/button.tsx']),
    ...pairs('forbidden', ['src/run/planted.ts'], ['react', 'react-dom', '#src/api/client.ts', '#src/components/button.tsx']),
    ...pairs('forbidden', ['src/api/planted.ts', 'src/components/planted.ts'], ['#src/run/run-session.ts']),
    ...pairs(
      'allowed',
      ['src/cockpit/planted.ts', 'src/paddock/planted.ts'],
      ['#src/run/run-session.ts', '#src/components/button.tsx', '#src/sync/outbox.ts'],
    ),
  ],
  'Start-up runs before packages are installed.': [
    ...pairs('forbidden', ['server/setup/planted.mjs', 'server/postgres/planted.mjs'], ['pg', 'zod', '#server/db/pool.ts']),
  ],
};
