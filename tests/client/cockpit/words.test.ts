import { describe, expect, it } from 'vitest';
import type { TapVerdict } from '#shared/pace/readout.ts';
import { metres, metresPerSecond, seconds } from '#shared/units.ts';
import {
  distanceText,
  durationText,
  errorText,
  holdWords,
  noReturnWords,
  sideWord,
  toGoText,
  verdictWords,
} from '#src/cockpit/view/words.ts';
import { sureText } from '#src/components/sure-text.ts';

const tap = (change: Partial<TapVerdict>): TapVerdict => ({
  seq: 4,
  checkpoint: null,
  verdict: 'used',
  moved: metres(11.4),
  scaleBefore: 480,
  scaleAfter: 480,
  scaleKept: 'settle',
  ...change,
});

describe('words of the cockpit', () => {
  it('says a magnitude and a word, never a bare sign', () => {
    expect([errorText(3.42, 1), errorText(-0.03, 2), errorText(12.04, 2), errorText(0.004, 2)]).toEqual([
      '3.4 late',
      '0.03 early',
      '12.04 late',
      '0.00 level',
    ]);
    expect(sideWord('below')).toBe('below plan');
  });

  it('never claims to be surer than two sigma', () => {
    expect([sureText(0.05), sureText(0.051), sureText(0.02), sureText(0.3)]).toEqual(['±0.1 s', '±0.2 s', '±0.04 s', '±0.6 s']);
  });

  it('counts down in the unit of the book', () => {
    expect([toGoText(840.4, 'km'), toGoText(1840, 'km'), toGoText(-3, 'km')]).toEqual(['840 m', '1.84 km', '0 m']);
    expect([toGoText(1.84 * 1609.344, 'mi'), toGoText(0.211 * 1609.344, 'mi')]).toEqual(['1.84 mi', '0.211 mi']);
    expect(distanceText(33.55 * 1609.344, 'mi')).toBe('33.550 mi');
  });

  it('cuts durations, so that no second is shown before it is over', () => {
    expect([durationText(56.99), durationText(3599.99), durationText(3725), durationText(-4)]).toEqual([
      '0:56',
      '59:59',
      '1:02:05',
      '0:00',
    ]);
  });

  it('says what cannot be done instead of a speed that must not be driven', () => {
    const speed = metresPerSecond(40);
    expect(holdWords({ kind: 'hold', speed, frozen: false })).toEqual(['hold']);
    expect(holdWords({ kind: 'cannot be made up', by: seconds(3.24), speed }).join(' ')).toBe('cannot be made up, 3.2 s short');
    expect(holdWords({ kind: 'cannot be given back', by: seconds(0.5), speed }).join(' ')).toBe('cannot be given back, 0.5 s over');
    expect(holdWords({ kind: 'none' })).toEqual([]);
  });

  it('says for how long the present speed may still be held', () => {
    expect(noReturnWords({ noReturn: { at: metres(28_100), in: seconds(41.6) } })).toBe('at this speed late for good in 42 s');
    expect(noReturnWords({ noReturn: null })).toBe('');
  });

  it('says what became of a touch', () => {
    expect(verdictWords(tap({}))).toBe('moved 11 m; scale kept');
    expect(verdictWords(tap({ scaleKept: null, scaleAfter: 480.144 }))).toBe('moved 11 m; scale up 0.03\u00a0%');
    expect(verdictWords(tap({ scaleKept: null, scaleAfter: 479.856 }))).toBe('moved 11 m; scale down 0.03\u00a0%');
    expect(verdictWords(tap({ scaleKept: null, scaleAfter: 480.001 }))).toBe('moved 11 m; scale holds');
    expect(verdictWords(tap({ verdict: 'doubted', moved: metres(-12.3) }))).toBe('12 m odd, not used; use it?');
    expect(verdictWords(tap({ verdict: 'doubted', moved: metres(3790) }))).toBe('3.8 km odd, not used; use it?');
    expect(verdictWords(tap({ verdict: 'voided' }))).toBe('undone');
  });
});
