import { describe, vi } from 'vitest';
import { wildDrives } from '#tests/unit/pace/arbitrary-drives.ts';
import { holdsOf } from '#tests/unit/pace/fold-holds.ts';
import { SCALE_RULES } from '#tests/unit/pace/rules.ts';

vi.setConfig({ testTimeout: 120_000 });

describe('a drive with lost sensors, touches right and wrong, acts at any time and wild observations', () => {
  for (const rule of SCALE_RULES) holdsOf(wildDrives, rule, { numRuns: 40, lookEvery: 7, endOnFailure: true });
});
