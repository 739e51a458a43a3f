import fc from 'fast-check';
import { beforeAll, describe, expect, it } from 'vitest';
import { createDrive } from '#shared/drive/drive-model.ts';
import { decodeBlocks, encodeBlock, type Journalled } from '#shared/journal/block.ts';
import { fromNdjson, toNdjson } from '#shared/journal/ndjson.ts';
import type { Observation } from '#shared/journal/observation.ts';
import { replay } from '#shared/journal/replay.ts';
import { begin, readout, snapshot, step } from '#shared/pace/run.ts';
import { runSheet } from '#shared/pace/sheet.ts';
import { micros } from '#shared/units.ts';
import { HEADER, PACK } from './header.ts';

/** A whole simulated run with scattered taps: 20 s of grid, the course, the finish. */
let journal: readonly Journalled[];
const END = micros(125_000_000);

beforeAll(() => {
  const officialMs = (PACK.attempt.releaseMs as number) - 20_000;
  const clock: Observation = { seq: 0, at: 0, type: 'clock.v1', source: 'exchange', officialMs, uncertaintyMs: 5 };
  const seen = createDrive({ pack: PACK, seed: 12, releaseAt: 20_000_000 }).advance(END, null);
  journal = [clock, ...seen.map((o, i) => ({ ...o, seq: i + 1 }) as Observation)];
});

const figures = (state: ReturnType<typeof replay>): string => JSON.stringify([readout(state, END), runSheet(state, HEADER)]);

describe('replay', () => {
  it('reaches the finish of a simulated run', () => {
    expect(journal.filter((o) => o.type === 'tap.v1').length).toBeGreaterThanOrEqual(2);
    expect(readout(replay(HEADER, journal), END)).toMatchObject({ phase: 'finished', finish: { elapsed: expect.any(Number) } });
  });

  it('gives the same observations, and so the same state, however the journal was cut into blocks, and through NDJSON', () => {
    // Equal observations fold to an equal state, because the fold asks nothing else: the state itself is compared once, below.
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 1, max: 400 }), { minLength: 1, maxLength: 30 }), (sizes) => {
        const parts: Uint8Array[] = [];
        for (let from = 0, n = 0; from < journal.length; n++) {
          const size = sizes[n % sizes.length] as number;
          parts.push(encodeBlock(from, journal.slice(from, from + size)));
          from += size;
        }
        const bytes = new Uint8Array(parts.reduce((n, part) => n + part.length, 0));
        let at = 0;
        for (const part of parts) {
          bytes.set(part, at);
          at += part.length;
        }
        const read = decodeBlocks(bytes);
        if (!read.ok) throw new Error(read.error.message);
        expect(read.value.flatMap((block) => block.observations)).toEqual(journal);
      }),
      { numRuns: 10 },
    );
    const text = fromNdjson(toNdjson(HEADER, journal));
    if (!text.ok) throw new Error(text.error.message);
    expect(figures(replay(text.value.header, text.value.observations))).toBe(figures(replay(HEADER, journal)));
  });

  it('goes on from a stored snapshot as if it had never stopped', () => {
    const whole = figures(replay(HEADER, journal));
    for (const cut of [1, 400, Math.floor(journal.length / 2), journal.length - 3]) {
      const state = begin(PACK);
      for (const o of journal.slice(0, cut)) step(state, o);
      const stored = JSON.parse(JSON.stringify(snapshot(state)));
      for (const o of journal.slice(cut)) step(stored, o);
      expect(figures(stored), `cut at ${cut}`).toBe(whole);
    }
  });

  it('keeps going over what it does not know, and says so', () => {
    const odd: readonly Journalled[] = [
      ...journal,
      { seq: journal.length, at: 1, type: 'tyre-heat.v3', x: 1 },
      { seq: journal.length + 1, at: 1, type: 'malformed', field: 'tap', was: {} },
    ];
    const sheet = runSheet(replay(HEADER, odd), HEADER);
    expect(sheet.unknownTypes).toEqual(expect.arrayContaining(['tyre-heat.v3', 'malformed']));
    expect(sheet.finish).toEqual(runSheet(replay(HEADER, journal), HEADER).finish);
  });
});
