import type { Room } from './room.ts';
import { SERVER_ROOMS } from './server-rooms.ts';
import { SHARED_ROOMS } from './shared-rooms.ts';
import { SRC_ROOMS } from './src-rooms.ts';

/**
 * Who may import whom, as one table. `generate-biome.ts` turns it into the linter's rules (one whole rule a room, because a
 * later override replaces an earlier one) and `import-rules.test.ts` plants a breach for every pair that is not in it.
 * Everything that is not allowed here is forbidden. Rooms stand in order from general to particular: where two rooms claim a
 * file, the later one wins, both as importer and as imported.
 */
export const ROOMS: readonly Room[] = [...SHARED_ROOMS, ...SERVER_ROOMS, ...SRC_ROOMS];

/** Tests and tool settings may import any room and any package; only the way of naming is held. */
export const FREE_FILES: readonly string[] = ['tests/**', '*.ts'];

/** Packages that tell the rooms apart, planted as breaches wherever they are not allowed. */
export const TELLING_PACKAGES: readonly string[] = [
  'react',
  'react-router',
  '@tanstack/react-query',
  'react-hook-form',
  '@hookform/resolvers/zod',
  'zod',
  'dexie',
  'uuid',
  'uplot',
  'drizzle-orm',
  'drizzle-orm/pg-core',
  'pg',
  'pg-boss',
  'express',
  'lucia',
  'node:fs',
];
