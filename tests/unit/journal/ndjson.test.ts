import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { fromNdjson, toNdjson } from '#shared/journal/ndjson.ts';
import type { RunHeader } from '#shared/journal/run-header.ts';
import { journal } from './arbitrary-observations.ts';
import { HEADER } from './header.ts';

const header: RunHeader = HEADER;
const lines = (...rest: readonly string[]): string => [JSON.stringify(header), ...rest].join('\n');
const TAP = '{"seq":0,"at":5,"type":"tap.v1","input":"glass","checkpoint":null}';

describe('NDJSON', () => {
  it('gives back any journal as it was', () => {
    fc.assert(
      fc.property(journal(0, { maxLength: 40 }), (observations) => {
        const text = toNdjson(header, observations);
        expect(text.endsWith('\n') && text.split('\n')).toHaveLength(observations.length + 2);
        expect(fromNdjson(text)).toEqual({ ok: true, value: { header, observations } });
      }),
    );
  });

  it('reads blank lines, CR line ends, a byte order mark and a missing last line end', () => {
    const text = `\uFEFF${lines(TAP, '', '{"seq":1,"at":6,"type":"later.v1","x":[1]}').replaceAll('\n', '\r\n')}`;
    const read = fromNdjson(text);
    expect(read.ok && read.value.observations.map((o) => o.type)).toEqual(['tap.v1', 'later.v1']);
  });

  it.each([
    ['', 1, 'empty'],
    ['\n', 1, 'empty'],
    ['{"format":', 1, 'not-json'],
    ['[]', 1, 'wrong-format'],
    ['{"format":"gpx","version":1}', 1, 'wrong-format'],
    ['{"format":"evenline-journal","version":"1"}', 1, 'wrong-format'],
    ['{"format":"evenline-journal","version":2}', 1, 'newer-version'],
    [JSON.stringify({ ...header, pack: null }), 1, 'wrong-header'],
    [JSON.stringify({ ...header, clockRate: '1' }), 1, 'wrong-header'],
    [lines(TAP, '{"seq":1,"at":'), 3, 'not-json'],
    [lines(TAP, 'null'), 3, 'not-an-observation'],
    [lines(TAP, '{"seq":1,"at":0.5,"type":"start-marked.v1"}'), 3, 'not-an-observation'],
    [lines(TAP, '{"seq":1,"at":1}'), 3, 'not-an-observation'],
    [lines(TAP, '{"seq":2,"at":1,"type":"start-marked.v1"}'), 3, 'sequence-gap'],
    [lines(TAP, TAP), 3, 'sequence-gap'],
    [lines(TAP, '{"seq":1,"at":1,"type":"tap-voided.v1","tap":"0"}'), 3, 'wrong-field'],
  ])('tells the fault of %j at line %i: %s', (text, line, code) => {
    const read = fromNdjson(text);
    if (read.ok) throw new Error('read as sound');
    expect(read.error).toMatchObject({ code, line });
    expect(read.error.message).toMatch(new RegExp(`^Line ${line}: .+\\. .+\\.$`));
    // Nothing that was sound before the fault is lost.
    if (line > 1) expect(read.error).toMatchObject({ header, observations: [{ seq: 0, type: 'tap.v1' }] });
  });
});
