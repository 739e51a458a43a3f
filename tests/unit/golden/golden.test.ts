import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { fromNdjson } from '#shared/journal/ndjson.ts';
import { replay } from '#shared/journal/replay.ts';
import { readout } from '#shared/pace/run.ts';
import type { LegRow, RunSheet } from '#shared/pace/run-sheet.ts';
import { runSheet } from '#shared/pace/sheet.ts';
import { micros } from '#shared/units.ts';
import expectedJson from './expected.json' with { type: 'json' };

/** Golden journals against figures that work-out.py got by plain arithmetic. */

interface ExpectedRun {
  readonly reactionS: number;
  readonly legs: readonly (Partial<LegRow> & { readonly checkpointId: string })[];
  readonly finish: { readonly elapsedS: number; readonly timeErrorS: number };
  readonly verdicts?: string;
  readonly pulses?: number;
}
const expected: Readonly<Record<string, ExpectedRun>> = expectedJson as never;

/** One microsecond of rounding for instants; float dust for the rest; the grid's own error for the plan. */
const CLOSE: Readonly<Record<string, number>> = {
  elapsedS: 1.5e-6,
  timeErrorS: 1.5e-6,
  targetS: 1e-9,
  movedM: 1e-6,
  measuredM: 1e-6,
  scaleBefore: 1e-8,
  scaleAfter: 1e-8,
  plannedS: 0.02,
};

function load(name: string): ReturnType<typeof replay> & { sheet: RunSheet } {
  const journal = fromNdjson(readFileSync(new URL(`./${name}.ndjson`, import.meta.url), 'utf8'));
  if (!journal.ok) throw new Error(journal.error.message);
  const { header, observations } = journal.value;
  const state = replay(header, observations);
  return Object.assign(state, { sheet: runSheet(state, header) });
}

describe.each(Object.keys(expected))('%s', (name) => {
  const want = expected[name] as ExpectedRun;
  const { sheet } = load(name);

  it('every leg', () => {
    for (const row of want.legs) {
      const got = sheet.legs.find((l) => l.checkpointId === row.checkpointId);
      for (const [key, value] of Object.entries(row)) {
        const actual = got?.[key as keyof LegRow];
        if (typeof value === 'number')
          expect(Math.abs((actual as number) - value), `${row.checkpointId} ${key}: ${actual} for ${value}`).toBeLessThanOrEqual(
            CLOSE[key] as number,
          );
        else expect(actual, `${row.checkpointId} ${key}`).toBe(value);
      }
    }
  });

  it('reaction, finish and counts', () => {
    expect(sheet.reactionS).toBeCloseTo(want.reactionS, 5);
    expect(sheet.finish?.elapsedS).toBeCloseTo(want.finish.elapsedS, 5);
    expect(sheet.finish?.timeErrorS).toBeCloseTo(want.finish.timeErrorS, 5);
    expect(sheet.outcome).toBe('finished');
    if (want.verdicts !== undefined) expect(sheet.taps.map((t) => t.verdict).join(' ')).toBe(want.verdicts);
    if (want.pulses !== undefined) expect(sheet.pulses).toBe(want.pulses);
  });

  it('twice over, to the same readouts', () => {
    const [one, two] = [load(name), load(name)];
    for (let at = 0; at <= one.now; at += 7_000_000) expect(readout(two, micros(at))).toEqual(readout(one, micros(at)));
    expect(two.sheet).toEqual(one.sheet);
  });
});
