import { createHash } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { canonicalJson } from '#shared/canonical-json.ts';
import { OBSERVATION_FIELDS } from '#shared/journal/observation-fields.ts';
import { VOCABULARY } from '#shared/journal/upcast.ts';

/**
 * The published shapes, pinned. Journals of these shapes lie on tablets and servers for years. If a line here no longer
 * matches, do not change the line: give the new shape the next version (`tap.v2`), keep the old one with an upgrade in
 * `upcast.ts`, and add a line for the new one.
 */
const PUBLISHED: Readonly<Record<string, string>> = {
  'pulse.v1': 'cfbfaa4b596854ce',
  'button.v1': 'd27f134d37b869c3',
  'pps.v1': 'd5328d89086a913e',
  'fix.v1': '33508c926f3ebb93',
  'sensor-gained.v1': '23f486c6baa72c24',
  'sensor-lost.v1': '23f486c6baa72c24',
  'epoch.v1': '8172d9bd453caf4e',
  'clock.v1': 'b175b4bc507f6d25',
  'clock-pair.v1': 'c034db28af8f1d01',
  'tap.v1': '46545a4114f376b2',
  'tap-voided.v1': '5608872bc23fc416',
  'tap-moved.v1': 'b514800d4c0ce9f7',
  'tap-accepted.v1': '5608872bc23fc416',
  'checkpoint-skipped.v1': '8af900d528e50946',
  'start-marked.v1': '44136fa355b3678a',
  'release-set.v1': '7ff7d5e2cc07ce2c',
  'target-set.v1': '17a6e9f81402caee',
  'staged-set.v1': '156721a87bb0499e',
  'limit-set.v1': '7088a40f417493cb',
  'line-moved.v1': 'cc3ebcbfbcd74c47',
  'run-stopped.v1': '44136fa355b3678a',
  'run-resumed.v1': '0d1ef501773ad76a',
  'run-ended.v1': '20714411da0f8116',
  'finish-shown.v1': '11c9479e8e60ce18',
  'note.v1': '832cb5683bf7f26f',
};

const digest = (shape: unknown): string => createHash('sha256').update(canonicalJson(shape)).digest('hex').slice(0, 16);

describe('the journal schema', () => {
  it('has every published type as it was published, or an upgrade from it', () => {
    for (const [type, pinned] of Object.entries(PUBLISHED)) {
      const fields = (OBSERVATION_FIELDS as Readonly<Record<string, unknown>>)[type];
      if (fields === undefined) expect(VOCABULARY.upgrades, `${type} was published and cannot vanish`).toHaveProperty([type]);
      else expect(digest(fields), `${type} changed: raise its version instead`).toBe(pinned);
    }
  });

  it('pins every type this build writes', () => {
    expect(Object.fromEntries(Object.entries(OBSERVATION_FIELDS).map(([type, fields]) => [type, digest(fields)]))).toEqual(
      Object.fromEntries(Object.keys(OBSERVATION_FIELDS).map((type) => [type, PUBLISHED[type]])),
    );
  });

  it('sees a changed, added or dropped field', () => {
    const tap = OBSERVATION_FIELDS['tap.v1'];
    expect(digest({ ...tap, force: 'number' })).not.toBe(digest(tap));
    expect(digest({ ...tap, checkpoint: 'text' })).not.toBe(digest(tap));
    expect(digest({ input: tap.input })).not.toBe(digest(tap));
  });
});
