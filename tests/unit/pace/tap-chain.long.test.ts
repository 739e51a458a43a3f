import { describe, expect, it } from 'vitest';
import type { Pack } from '#shared/course/pack.ts';
import type { NewObservation, Observation } from '#shared/journal/observation.ts';
import { clockCheck, fromRest, instantOf, journal, type Motion, pulses, tapAt } from '#tests/unit/pace/drives.ts';
import { act, fold, leg, look, sheetOf } from '#tests/unit/pace/folds.ts';
import { pack, withSettings } from '#tests/unit/pace/packs.ts';

/** Taps judged together: what the ones after it say of one that stood out. */

const motion = fromRest(2.5, 40, 0.4);
const at = (metres: number): number => instantOf(motion, metres);
const verdicts = (p: Pack, list: readonly Observation[]): string =>
  sheetOf(p, list)
    .taps.map((t) => t.verdict)
    .join(' ');
/** What the wheel has rolled where the car has driven: the same until a place, then otherwise. */
const rolled = (after: number, otherwise: (beyond: number) => number): Motion => ({
  metresAt: (t) => {
    const m = motion.metresAt(t);
    return m <= after ? m : after + otherwise(m - after);
  },
});
const places = ['settle', 'one', 'two', 'three'] as const;
const METRES = { settle: 4_000, one: 12_000, two: 24_000, three: 28_000 } as const;
/** A touch at each place, some seconds off. */
const touches = (off: Partial<Record<keyof typeof METRES, number>> = {}): NewObservation[] =>
  places.map((id) => tapAt(at(METRES[id]) + (off[id] ?? 0), id));
const drive = (wheel: Motion = motion): NewObservation[] => [clockCheck(pack), ...pulses(wheel, { until: 765, hz: 10 })];
const afterTwo = at(24_000) + 30;

describe('a distance that jumped', () => {
  // a sensor that missed one pulse in twenty over 2 km between one and two: 100 m are missing from there on. A line that is
  // dead outright is noticed, and filled; this looks like a car that was a little slower.
  const missing = rolled(15_000, (beyond) => beyond - 0.05 * Math.min(beyond, 2_000));
  const list = journal(drive(missing), touches());

  it('has the first touch doubted and the second believe both, with the scale left alone over the lost counts', () => {
    const [held] = look(pack, list, [afterTwo]);
    expect(held?.lastTap).toMatchObject({ checkpoint: { id: 'two' }, verdict: 'doubted' });
    const sheet = sheetOf(pack, list);
    expect(sheet.taps.map((t) => t.verdict)).toEqual(['used', 'used', 'used', 'used']);
    expect(leg(sheet, 'two')).toMatchObject({ by: 'tap', scaleKept: 'place', scaleAfter: leg(sheet, 'one').scaleAfter });
    expect(leg(sheet, 'two').movedM).toBeCloseTo(100, 0);
    expect(Math.abs(leg(sheet, 'three').movedM as number)).toBeLessThan(1);
    expect(sheet.finish?.elapsedS).toBeCloseTo(at(30_000), 1);
  });

  it('void the second touch and the first is doubted again; void both and they had never been', () => {
    const seqOf = (id: string): number => list.find((o) => o.type === 'tap.v1' && o.checkpoint === id)?.seq as number;
    const voiding = (...taps: number[]): Observation[] =>
      [...list, ...taps.map((tap, i) => ({ ...act(764.5, { type: 'tap-voided.v1', tap }), seq: list.length + i }))] as Observation[];
    expect(verdicts(pack, voiding(seqOf('three')))).toBe('used used doubted voided');
    const never = fold(pack, journal(drive(missing), touches().slice(0, 2)));
    const both = fold(pack, voiding(seqOf('two'), seqOf('three')));
    expect(both.derived.passings).toEqual(never.derived.passings);
    expect(both.derived.anchors).toEqual(never.derived.anchors);
  });

  it('is one story whichever way the journal was folded', () => {
    const whole = fold(pack, list);
    const again = fold(pack, [...list, { ...act(764.9, { type: 'tap-voided.v1', tap: 999_999 }), seq: list.length }] as Observation[]);
    expect(again.derived).toEqual(whole.derived);
  });
});

describe('a scale that changed more than tyres do', () => {
  // one tyre loses air after one: 1 % more turns, 120 m by two, 160 m by three
  const soft = rolled(12_000, (beyond) => beyond * 1.01);
  const list = journal(drive(soft), touches());

  it.each(['ratio', 'gain'] as const)('is believed at the second touch, and learnt by the rule (%s)', (scaleRule) => {
    const p = withSettings(pack, { scaleRule });
    expect(look(p, list, [afterTwo])[0]?.lastTap).toMatchObject({ checkpoint: { id: 'two' }, verdict: 'doubted' });
    const sheet = sheetOf(p, list);
    expect(sheet.taps.map((t) => t.verdict)).toEqual(['used', 'used', 'used', 'used']);
    expect(leg(sheet, 'two').scaleAfter / leg(sheet, 'one').scaleAfter).toBeCloseTo(1 / 1.01, 3);
    expect(sheet.finish?.elapsedS).toBeCloseTo(at(30_000), 1);
  });

  it('places, and learns nothing, where the scale is to be left alone', () => {
    const sheet = sheetOf(withSettings(pack, { scaleRule: 'place only' }), list);
    expect(leg(sheet, 'three')).toMatchObject({ by: 'tap', scaleAfter: 250 });
  });
});

describe('one mistaken touch', () => {
  it.each([
    ['the first', { settle: 3.5 }, 'doubted used used used'],
    ['the one that would have set the scale', { one: 3 }, 'used doubted used used'],
    ['one of two sure places', { two: 3 }, 'used used doubted used'],
    ['early, at another place', { two: -20 }, 'used used doubted used'],
    ['the last', { three: 3 }, 'used used used doubted'],
  ] as const)('is dropped once it stands out, and spoils nothing: %s', (_, off, expected) => {
    for (const scaleRule of ['ratio', 'gain'] as const) {
      const sheet = sheetOf(withSettings(pack, { scaleRule }), journal(drive(), touches(off)));
      expect(sheet.taps.map((t) => t.verdict).join(' ')).toBe(expected);
      for (const row of sheet.legs) expect(Math.abs(row.scaleAfter / 250 - 1)).toBeLessThan(3e-4);
      expect(Math.abs((sheet.finish?.elapsedS as number) - at(30_000))).toBeLessThan(0.15);
    }
  });

  it('was used while nothing spoke against it', () => {
    const list = journal(drive(), touches({ one: 3 }));
    const [then] = look(pack, list, [at(12_000) + 10]);
    expect(then?.lastTap).toMatchObject({ checkpoint: { id: 'one' }, verdict: 'used' });
  });
});
