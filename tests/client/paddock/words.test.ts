import { describe, expect, it } from 'vitest';
import { timeErrorText } from '#src/paddock/parts/time-error.tsx';
import { clockInZone, formatDate, relativeAge } from '#src/paddock/parts/when.ts';
import { keptText, misfitText, movedText } from '#src/paddock/runs/run-words.ts';

describe('time errors in a table', () => {
  it('are a magnitude and a word, never a sign, and align on the decimal point', () => {
    const column = [12.8, -0.68, 0.001, 6.4].map((seconds) => timeErrorText(seconds, 2));
    expect(column).toEqual(['12.80 late ', '0.68 early', '0.00 level', '6.40 late ']);
    const fromTheRight = column.map((text) => text.length - text.indexOf('.'));
    expect(new Set(fromTheRight).size).toBe(1);
  });
});

describe('what a touch moved', () => {
  it('is on or back, aligned, and nothing where no touch was used', () => {
    const column = [11.42, -4.3, 0.02].map(movedText);
    expect(column).toEqual(['11.4 on  ', '4.3 back', '0.0     ']);
    expect(new Set(column.map((text) => (text ?? '').length - (text ?? '').indexOf('.'))).size).toBe(1);
    expect(movedText(null)).toBeNull();
  });

  it('says why a scale was kept, even for a reason of a newer engine', () => {
    expect(keptText('settle')).toBe('kept: tyres still settling');
    expect(keptText('something new')).toBe('kept: something new');
  });
});

describe('where a touch that was not used came', () => {
  const figures = { input: 'glass' as const, varianceM2: 4, surveySigmaM: 2, speed: 50 };
  it.each([
    [{ figures: { ...figures, misfitM: 42.31 }, movedM: 0 }, ', 42.3 m before the place'],
    [{ figures: { ...figures, misfitM: -150.2 }, movedM: -150.2 }, ', 150.2 m after the place'],
    [{ movedM: -8 }, ', 8.0 m after the place'],
    [{ figures: { ...figures, misfitM: 0.04 }, movedM: 0.04 }, ''],
  ])('%j: "%s"', (tap, words) => {
    expect(misfitText(tap)).toBe(words);
  });
});

describe('instants and ages', () => {
  it('name their zone', () => {
    expect(clockInZone(Date.UTC(2026, 5, 13, 8, 42), 'Europe/Vienna')).toBe('10:42:00 Europe/Vienna');
    expect(formatDate('2026-06-13')).toBe('13 Jun 2026');
  });

  it.each([
    [-30_000, 'just now'],
    [-61_000, '1 minute ago'],
    [-3 * 3_600_000, '3 hours ago'],
    [-50 * 3_600_000, '2 days ago'],
    [90_000, 'in 1 minute'],
  ])('tell %i ms as %s', (span, words) => {
    expect(relativeAge(1_780_000_000_000 + span, 1_780_000_000_000)).toBe(words);
  });
});
