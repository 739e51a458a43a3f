import fc from 'fast-check';
import { describe, expect, it, vi } from 'vitest';
import type { NewObservation } from '#shared/journal/observation.ts';
import { judgeSentence } from '#shared/sensor/checksum.ts';
import { createSentenceReader } from '#shared/sensor/sentence-reader.ts';
import { writeButton, writeGga, writeGll, writePps, writeRmc, writeVtg, writeWheel, writeZda } from '#shared/sensor/sentence-writer.ts';
import { bytesOf } from '#tests/unit/sensor/reading.ts';

/** Many lines on a busy machine. */
vi.setConfig({ testTimeout: 30_000 });

const uint32 = fc.integer({ min: 0, max: 2 ** 32 - 1 });
const receiver = fc.record({
  utcMs: fc.integer({ min: Date.UTC(2024, 0, 1), max: Date.UTC(2030, 0, 1) }),
  lat: fc.double({ min: -90, max: 90, noNaN: true }),
  lon: fc.double({ min: -180, max: 180, noNaN: true }),
  speed: fc.double({ min: 0, max: 80, noNaN: true }),
  course: fc.double({ min: 0, max: 359.9, noNaN: true }),
});
const sentence = fc.oneof(
  fc.tuple(fc.nat(255), uint32, uint32).map((a) => writeWheel(...a)),
  fc.tuple(fc.nat(255), uint32, uint32).map((a) => writeButton(...a)),
  uint32.map(writePps),
  receiver.map((r) => writeRmc(r)),
  receiver.map((r) => writeGga(r)),
  receiver.map((r) => writeGll(r)),
  receiver.map((r) => writeVtg(r)),
  receiver.map((r) => writeZda(r.utcMs)),
  fc.string({ unit: 'binary-ascii', maxLength: 40 }).map((text) => `${text}\n`),
);
const stream = fc.array(sentence, { minLength: 1, maxLength: 12 }).map((list) => list.join(''));

function read(chunks: readonly Uint8Array[]): { observations: NewObservation[]; good: number; garbled: number } {
  const reader = createSentenceReader();
  const observations = [...chunks, bytesOf('\n')].flatMap((chunk) => reader.push(chunk, 5_000_000));
  observations.push(...reader.push(new Uint8Array(), 9_000_000));
  return { observations, good: reader.goodLines, garbled: reader.garbledLines };
}

function split(bytes: Uint8Array, cuts: readonly number[]): Uint8Array[] {
  const at = [...new Set([0, ...cuts.map((cut) => cut % (bytes.length + 1)), bytes.length])].sort((a, b) => a - b);
  return at.slice(1).map((end, i) => bytes.subarray(at[i], end));
}

/** Everything but the instant: a lost line may move another line's instant by the jitter it no longer sets the floor for. */
const content = (o: NewObservation): string => JSON.stringify({ ...o, at: 0 });

describe('a byte stream', () => {
  it('gives the same observations however it is split', () => {
    fc.assert(
      fc.property(stream, fc.array(fc.nat(), { maxLength: 30 }), (text, cuts) => {
        const bytes = bytesOf(text);
        const whole = read([bytes]);
        expect(read(split(bytes, cuts))).toEqual(whole);
        expect(read([...bytes].map((byte) => Uint8Array.of(byte)))).toEqual(whole);
      }),
      { numRuns: 300 },
    );
  });

  it('with one byte changed gives nothing that was not sent', () => {
    const pulses = fc.array(
      fc.oneof(
        fc.tuple(fc.nat(255), uint32, uint32).map((a) => writeWheel(...a)),
        uint32.map(writePps),
      ),
      { minLength: 1, maxLength: 8 },
    );
    fc.assert(
      fc.property(pulses, fc.nat(), fc.nat(255), (list, where, byte) => {
        const bytes = bytesOf(list.join(''));
        const sent = new Set(read([bytes]).observations.map(content));
        bytes[where % bytes.length] = byte;
        const got = read([bytes]);
        for (const o of got.observations) expect(sent).toContain(content(o));
        expect(got.observations.length).toBeGreaterThanOrEqual(list.length - 2);
      }),
      { numRuns: 1000 },
    );
  });

  it('cut anywhere gives the whole lines before and after the cut, and no others', () => {
    fc.assert(
      fc.property(
        fc.array(fc.tuple(fc.nat(255), uint32, uint32), { minLength: 2, maxLength: 8 }),
        fc.nat(),
        fc.nat(60),
        (list, where, length) => {
          const lines = list.map((a) => writeWheel(...a));
          const text = lines.join('');
          const from = where % text.length;
          const to = Math.min(text.length, from + length + 1);
          // Untouched: from its dollar to its last digit outside the cut, and not run together with what follows it.
          let end = 0;
          const whole = lines.filter((line) => {
            end += line.length;
            return end - 2 <= from || end - line.length >= to;
          });
          const damaged = text.slice(0, from) + text.slice(to);
          const got = read([bytesOf(damaged)]).observations.map((o) =>
            o.type === 'pulse.v1' ? writeWheel(o.channel, o.count, o.boxUs) : 'other',
          );
          const others = got.filter((line) => !whole.includes(line));
          // Two halves run together fit their checksum once in 256 times; nothing can tell. More than that one is a fault.
          if (others.length > 0) expect(pieceAt(damaged, from)).toSatisfy((piece: string) => judgeSentence(piece) === 'ok');
          expect(others.length).toBeLessThanOrEqual(1);
          expect(got.length - others.length).toBeGreaterThanOrEqual(whole.length - 1);
        },
      ),
      { numRuns: 1000 },
    );
  });
});

/** The sentence that holds the seam at `from`. */
function pieceAt(text: string, from: number): string {
  const begin = text.lastIndexOf('$', from - 1);
  const end = text.indexOf('\r', from);
  return text.slice(begin, end === -1 ? undefined : end);
}
