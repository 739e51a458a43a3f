import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { checksumOf, frameSentence, judgeSentence } from '#shared/sensor/checksum.ts';
import { hasRecorded, recorded, recordedNote } from '#tests/e2e/support/recorded-data.ts';
import { readAll } from '#tests/unit/sensor/reading.ts';

interface Row {
  readonly verdict: string;
  readonly computed: string;
  readonly sentence: string;
}

const rows = (): Row[] =>
  readFileSync(recorded('vectors/nmea_checksum.tsv'), 'latin1')
    .split('\n')
    .filter((line) => line !== '' && !line.startsWith('#') && !line.startsWith('file\t'))
    .map((line) => {
      const [, , verdict = '', computed = '', , ...rest] = line.split('\t');
      return { verdict, computed, sentence: rest.join('\t') };
    });

describe('sentence checksum', () => {
  // The GLL example that circulates with most descriptions of NMEA 0183; checksum from memory.
  it('frames a published example', () => {
    expect(frameSentence('GPGLL,4916.45,N,12311.12,W,225444,A,')).toBe('$GPGLL,4916.45,N,12311.12,W,225444,A,*1D');
  });

  it('accepts lower-case digits and nothing after them', () => {
    expect(judgeSentence('$PEVLT,5*0a')).not.toBe('malformed');
    expect(judgeSentence(`${frameSentence('PEVLT,5')} `)).toBe('malformed');
  });
});

describe.skipIf(!hasRecorded)(`verdicts on real receiver lines${recordedNote}`, () => {
  it('agree on all 73: 45 ok, 15 bad, 12 malformed, 1 without', () => {
    const counts = new Map<string, number>();
    for (const { verdict, computed, sentence } of rows()) {
      expect({ sentence, verdict: judgeSentence(sentence).replace(' ', '_') }).toEqual({ sentence, verdict });
      if (verdict === 'ok' || verdict === 'bad') expect(checksumOf(sentence.slice(1, -3))).toBe(Number.parseInt(computed, 16));
      counts.set(verdict, (counts.get(verdict) ?? 0) + 1);
    }
    expect(Object.fromEntries(counts)).toEqual({ ok: 45, bad: 15, malformed: 12, no_checksum: 1 });
  });

  it('decide what the reader counts; a dollar inside a line begins a sentence of its own', () => {
    for (const { verdict, sentence } of rows()) {
      const { reader, observations } = readAll(`${sentence}\r\n`);
      const pieces = sentence.split(/(?=\$)/).filter((piece) => piece.trim() !== '');
      const good = pieces.filter((piece) => judgeSentence(piece) === 'ok').length;
      expect({ sentence, counts: [reader.goodLines, reader.garbledLines] }).toEqual({ sentence, counts: [good, pieces.length - good] });
      if (verdict === 'ok') expect(good).toBe(1);
      if (good === 0) expect(observations).toEqual([]);
    }
  });
});
