import fc from 'fast-check';
import { describe, vi } from 'vitest';
import { journal } from '#tests/unit/journal/arbitrary-observations.ts';
import { type Any, holdsOf } from '#tests/unit/pace/fold-holds.ts';
import { SCALE_RULES } from '#tests/unit/pace/rules.ts';
import { wildObservations } from '#tests/unit/pace/wild-observations.ts';

vi.setConfig({ testTimeout: 60_000 });

describe('near the release with damaged fields, or every published type with any number at any instant', () => {
  const anything = fc.oneof(wildObservations, journal(0, { maxLength: 80 }) as fc.Arbitrary<readonly Any[]>);
  for (const rule of SCALE_RULES) holdsOf(anything, rule, { numRuns: 120, lookEvery: 1 });
});
