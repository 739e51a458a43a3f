import { describe, expect, it } from 'vitest';
import type { Pack } from '#shared/course/pack.ts';
import type { NewObservation, Observation } from '#shared/journal/observation.ts';
import { clockCheck, fromRest, instantOf, journal, pulses, RELEASE_US, tapAt } from '#tests/unit/pace/drives.ts';
import { act, fold, leg, look, sheetOf, us } from '#tests/unit/pace/folds.ts';
import { pack, withSettings } from '#tests/unit/pace/packs.ts';

const motion = fromRest(2.5, 40, 0.4);
/** The wheel reads 0.8 % short: true metres a pulse 0.252, believed 0.250. */
const SHORT = 0.252;
const drive = (until: number, metresPerPulse = 0.25): NewObservation[] => [clockCheck(pack), ...pulses(motion, { until, metresPerPulse })];
const at = (metres: number): number => instantOf(motion, metres);
const seqOf = (list: readonly Observation[], t: number): number =>
  list.find((o) => (o.type === 'tap.v1' || o.type === 'button.v1') && o.at === us(t))?.seq as number;
/** A journal, then acts that name the tap touched at t. */
const naming = (
  list: NewObservation[],
  t: number,
  later: number,
  make: (tap: number) => { type: string; [key: string]: unknown },
): Observation[] => {
  const with0 = journal(list, [act(later, { type: 'note.v1', text: '' })]);
  const tap = seqOf(with0, t);
  return with0.map((o) => (o.type === 'note.v1' ? ({ seq: o.seq, at: o.at, ...make(tap) } as unknown as Observation) : o));
};

describe('a touch', () => {
  it('is provisional until a later sample, then places the car where it was at its instant', () => {
    // between two polls of the box, 0.8 m past the place
    const t = at(4_000.8);
    const list = journal(drive(130, SHORT), [tapAt(t)]);
    const [before, just, after] = look(pack, list, [t - 0.01, t + 0.001, t + 0.1]);
    expect(before?.next).toMatchObject({ checkpoint: { id: 'settle' }, inReach: true, index: 1, of: 6 });
    expect(just?.lastTap?.verdict).toBe('provisional');
    expect(after?.lastTap).toMatchObject({ verdict: 'used', checkpoint: { id: 'settle' }, scaleKept: 'settle' });
    expect(Math.abs((after?.lastTap?.moved as number) - (4_000 - (4_000.8 * 250) / 252))).toBeLessThan(0.6);
    expect(Math.abs((after?.distance as number) - (motion.metresAt(t + 0.1) - 0.8))).toBeLessThan(0.5);
    expect(after?.next?.checkpoint.id).toBe('one');
  });

  it('counts at its instant less the navigator’s lead, by input', () => {
    const p = withSettings(pack, { tapLeadMs: { glass: 200, wired: -100 } });
    const glass = sheetOf(p, journal(drive(130), [tapAt(at(4_000) + 0.2)]));
    expect(leg(glass, 'settle').elapsedS).toBeCloseTo(at(4_000), 4);
    const wired = sheetOf(p, journal(drive(130), [tapAt(at(4_000) - 0.1, null, 'wired')]));
    expect(leg(wired, 'settle').elapsedS).toBeCloseTo(at(4_000), 4);
  });

  it('by the wired button is a touch like any other; the first count is a baseline, a restarted box none', () => {
    const press = (t: number, presses: number): NewObservation => act(t, { type: 'button.v1', button: 0, presses, boxUs: 0 });
    const t = at(4_000);
    const sheet = sheetOf(pack, journal(drive(130), [press(-5, 7), press(2, 7), press(30, 0), press(31, 7), press(t, 8), press(t + 5, 8)]));
    expect(sheet.taps).toHaveLength(1);
    expect(leg(sheet, 'settle')).toMatchObject({ by: 'tap' });
    const restarted = sheetOf(pack, journal(drive(130), [press(-5, 7), press(50, 0), press(t, 1)]));
    expect(leg(restarted, 'settle')).toMatchObject({ by: 'tap' });
    const wrapped = sheetOf(pack, journal(drive(130), [press(-5, 2 ** 32 - 1), press(t, 0)]));
    expect(leg(wrapped, 'settle')).toMatchObject({ by: 'tap' });
  });

  it('twice within two seconds is one', () => {
    const sheet = sheetOf(pack, journal(drive(130), [tapAt(at(4_000)), tapAt(at(4_000) + 0.4), tapAt(at(4_000) + 1.5, 'one')]));
    expect(sheet.taps.map((t) => t.verdict)).toEqual(['used', 'repeated', 'repeated']);
  });

  it('when the first of a double touch is voided, the second counts', () => {
    const list = naming([...drive(130), tapAt(at(4_000)), tapAt(at(4_000) + 0.4)], at(4_000), at(4_000) + 8, (tap) => ({
      type: 'tap-voided.v1',
      tap,
    }));
    expect(sheetOf(pack, list).taps.map((t) => t.verdict)).toEqual(['voided', 'used']);
  });

  it('far from every place is none; on the grid too', () => {
    const sheet = sheetOf(pack, journal(drive(130), [tapAt(-5), tapAt(60)]));
    expect(sheet.taps.map((t) => t.verdict)).toEqual(['no place near', 'no place near']);
    expect(leg(sheet, 'settle').by).toBe('distance');
  });

  it('that comes late belongs to the missed place while in its reach', () => {
    const list = journal(drive(130), [tapAt(at(4_000) + 1.2)]);
    const [missed] = look(pack, list, [at(4_000) + 1]);
    expect(missed?.next).toMatchObject({ checkpoint: { id: 'settle' }, inReach: true });
    expect(missed?.warnings).toContainEqual({ code: 'checkpoint-missed', checkpoint: 'settle' });
    const [beyond] = look(pack, list, [at(4_000) + 6]);
    expect(beyond?.next?.checkpoint.id).toBe('one');
    expect(leg(sheetOf(pack, list), 'settle').by).toBe('tap');
  });
});

describe('a doubtful touch', () => {
  // after two good places and 12 km on tyres still warming the car is known to some 18 m: 2.5 s at 40 m/s is 100 m
  const good = [tapAt(at(4_000)), tapAt(at(12_000))];
  const wrong = at(24_000) + 2.5;

  it('is not used but offered, with what it would move', () => {
    const list = journal(drive(620), good, [tapAt(wrong, 'two')]);
    const sheet = sheetOf(pack, list);
    expect(sheet.taps[2]).toMatchObject({ checkpoint: 'two', verdict: 'doubted' });
    expect(sheet.taps[2]?.movedM).toBeCloseTo(-100, 0);
    expect(leg(sheet, 'two')).toMatchObject({ by: 'distance', scaleKept: null });
    expect(leg(sheet, 'two').elapsedS).toBeCloseTo(at(24_000), 1);
  });

  it('is used where the navigator overrules: it places, and does not teach the scale', () => {
    const list = naming([...drive(620), ...good, tapAt(wrong, 'two')], wrong, wrong + 5, (tap) => ({ type: 'tap-accepted.v1', tap }));
    const sheet = sheetOf(pack, list);
    expect(leg(sheet, 'two')).toMatchObject({ by: 'tap', scaleKept: 'place', atUs: us(wrong) });
    expect(leg(sheet, 'two').scaleAfter).toBe(leg(sheet, 'two').scaleBefore);
  });

  it('moved to another place belongs there', () => {
    const t = at(24_000) + 0.05;
    const list = naming([...drive(620), ...good, tapAt(t, 'three')], t, t + 5, (tap) => ({ type: 'tap-moved.v1', tap, checkpoint: 'two' }));
    expect(sheetOf(pack, list).taps[2]).toMatchObject({ checkpoint: 'two', verdict: 'used' });
    expect(leg(sheetOf(pack, list), 'two').by).toBe('tap');
  });
});

describe('the wheel scale', () => {
  const list = (until: number): Observation[] =>
    journal(drive(until, SHORT), [tapAt(at(4_000)), tapAt(at(12_000)), tapAt(at(24_000)), tapAt(at(28_000))]);

  it('settle leaves it, scale corrects it by official over measured, place leaves it', () => {
    const sheet = sheetOf(pack, list(800));
    expect(leg(sheet, 'settle')).toMatchObject({ scaleAfter: 250, scaleKept: 'settle' });
    const one = leg(sheet, 'one');
    const measuredLeg = (one.measuredM as number) - 4_000;
    expect(one.scaleAfter).toBeCloseTo((250 * 8_000) / measuredLeg, 9);
    expect(one.scaleAfter).toBeCloseTo(252, 1);
    const two = leg(sheet, 'two');
    expect(two.scaleAfter).toBeCloseTo((one.scaleAfter * 12_000) / ((two.measuredM as number) - 12_000), 9);
    expect(leg(sheet, 'three')).toMatchObject({ scaleAfter: two.scaleAfter, scaleKept: 'place' });
    expect(sheet.finish?.elapsedS).toBeCloseTo(at(30_000), 1);
  });

  it('a leg too short to trust leaves it: 2σ/σλ, 2 × 4.5 m over 0.1 % = 9.0 km after the first correction', () => {
    const short = (to: string): Pack => ({
      ...pack,
      courseBook: {
        ...pack.courseBook,
        checkpoints: pack.courseBook.checkpoints.map((c) => (c.id === 'two' ? { ...c, at: { text: to, unit: 'km' as const } } : c)),
      },
    });
    const run = (to: string, metres: number) =>
      leg(sheetOf(short(to), journal(drive(620, SHORT), [tapAt(at(4_000)), tapAt(at(12_000)), tapAt(at(metres))])), 'two');
    expect(run('20.800', 20_800).scaleKept).toBe('leg too short');
    expect(run('21.100', 21_100).scaleKept).toBeNull();
  });

  it('short legs add up from the last place that set the scale, and the placing between them does not matter', () => {
    const p: Pack = {
      ...pack,
      courseBook: {
        ...pack.courseBook,
        checkpoints: pack.courseBook.checkpoints.map((c) =>
          c.id === 'two'
            ? { ...c, at: { text: '16.000', unit: 'km' } }
            : c.id === 'three'
              ? { ...c, duty: 'scale', at: { text: '21.500', unit: 'km' } }
              : c,
        ),
      },
    };
    const run = (...between: NewObservation[]) =>
      sheetOf(p, journal(drive(620, SHORT), [tapAt(at(4_000)), tapAt(at(12_000)), tapAt(at(21_500))], between));
    // 4 km and 5.5 km are each less than 9.0 km, 9.5 km are not; the touch between is 8 m late
    const sheet = run(tapAt(at(16_000) + 0.2));
    expect(leg(sheet, 'two')).toMatchObject({ by: 'tap', scaleKept: 'leg too short', scaleAfter: leg(sheet, 'one').scaleAfter });
    expect(leg(sheet, 'two').movedM).toBeCloseTo(-8, 0);
    expect(leg(sheet, 'three').scaleKept).toBeNull();
    expect(leg(sheet, 'three').scaleAfter).toBeCloseTo(252, 1);
    expect(leg(sheet, 'three').scaleAfter).toBe(leg(run(), 'three').scaleAfter);
  });

  it('gain: as much of the ratio as the leg deserves', () => {
    const sheet = sheetOf(withSettings(pack, { scaleRule: 'gain' }), list(800));
    const one = leg(sheet, 'one');
    const ratio = 8_000 / ((one.measuredM as number) - 4_000);
    // s² = 0.003² and the drift of 4 + 8 km; σ² = (0.1·40)² + 2² + (1/√12)²
    const s2 = 0.003 ** 2 + 1.2e-11 * (4_000 + (one.measuredM as number) - 4_000 - (leg(sheet, 'settle').movedM as number));
    const g = s2 / (s2 + (2 * (16 + 4 + 1 / 12)) / 8_000 ** 2);
    expect(one.scaleAfter).toBeCloseTo(250 * ratio ** g, 4);
  });

  it('place only: never', () => {
    const sheet = sheetOf(withSettings(pack, { scaleRule: 'place only' }), list(800));
    expect(leg(sheet, 'one')).toMatchObject({ scaleAfter: 250, scaleKept: 'rule', by: 'tap' });
  });

  it('a skipped place is neither offered nor touched, but passed', () => {
    const skipped = journal(drive(400), [act(200, { type: 'checkpoint-skipped.v1', checkpoint: 'one' }), tapAt(at(12_000))]);
    const [r] = look(pack, skipped, [250]);
    expect(r?.next?.checkpoint.id).toBe('two');
    const row = leg(sheetOf(pack, skipped), 'one');
    expect(row.by).toBe('skipped');
    expect(row.elapsedS).toBeCloseTo(at(12_000), 1);
  });
});

describe('raw values', () => {
  it('a touch while the wheel is silent is taken up as the gap turns out to have been', () => {
    const t = at(12_000);
    const gappy = drive(400).filter((o) => o.type !== 'pulse.v1' || Math.abs(o.at - us(t)) > 3_000_000);
    const [waiting, after] = look(pack, journal(gappy, [tapAt(at(4_000)), tapAt(t), act(t + 2.5, { type: 'note.v1', text: '' })]), [
      t + 2.6,
      t + 5,
    ]);
    expect(waiting?.lastTap?.verdict).toBe('used');
    expect(after?.lastTap?.verdict).toBe('used');
    expect(Math.abs(after?.lastTap?.moved as number)).toBeLessThan(0.5);
    expect(fold(pack, journal(gappy, [tapAt(t)])).acts.pending).toBe(0);
    expect(RELEASE_US).toBe(us(0));
  });
});
