import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { formatClock } from '#shared/course/format.ts';
import { instantOfClock } from '#src/cockpit/entry/clock-instant.ts';
import {
  clockSeconds,
  decimalDigits,
  decimalText,
  durationDigits,
  durationMs,
  type EntryField,
  type EntryKind,
  meant,
  pressKey,
  shownText,
} from '#src/cockpit/entry/entry-field.ts';
import { releaseWords } from '#src/cockpit/grid/release-entry.tsx';

const field = (kind: EntryKind, present: string): EntryField => ({ id: 'f', label: '', unit: '', kind, present, typed: '' });
const press = (start: EntryField, keys: string): EntryField => [...keys].reduce(pressKey, start);

describe('typing on the grid', () => {
  it('shows what stands until the first key, then the mask filling up', () => {
    const release = field('clock', '104230');
    expect(shownText(release)).toBe('10:42:30');
    expect(shownText(press(release, '1046'))).toBe('10:46:__');
    expect(shownText(press(release, '104600'))).toBe('10:46:00');
    expect(meant(press(release, '1⌫'))).toBe('104230');
  });

  it('takes no key that does not fit', () => {
    expect(press(field('clock', ''), '1.0').typed).toBe('10');
    expect(press(field('clock', ''), '1234567').typed).toBe('123456');
    expect(press(field('decimal', ''), '1..2.34567').typed).toBe('1.234');
  });

  it('reads clocks and durations, and refuses what no clock shows', () => {
    expect(clockSeconds('104600')).toBe(38_760);
    expect([clockSeconds('246000'), clockSeconds('106000'), clockSeconds('10460')]).toEqual([null, null, null]);
    expect(durationMs('02020')).toBe(1_220_000);
    expect(durationMs('0202041')).toBe(1_220_410);
    expect(durationMs('07000')).toBeNull();
  });

  it('gives back the duration that it was made of', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 35_999_999 }), (ms) => {
        expect(durationMs(durationDigits(ms))).toBe(ms);
      }),
    );
  });

  it('keeps decimals as they will be printed', () => {
    expect([decimalText('007.50'), decimalText('0.5'), decimalText('5.'), decimalText('')]).toEqual(['7.50', '0.5', null, null]);
    expect([decimalDigits(61, 3), decimalDigits(61.25, 3), decimalDigits(0, 1)]).toEqual(['61', '61.25', '0']);
  });
});

describe('instant of a clock time in the event’s zone', () => {
  const near = Date.UTC(2026, 5, 6, 9, 40, 0);

  it('is the nearest one', () => {
    expect(instantOfClock(clockSeconds('104600') ?? 0, near, 'Europe/London')).toBe(Date.UTC(2026, 5, 6, 9, 46, 0));
    expect(instantOfClock(clockSeconds('000100') ?? 0, Date.UTC(2026, 5, 6, 22, 58, 0), 'Europe/London')).toBe(
      Date.UTC(2026, 5, 6, 23, 1, 0),
    );
  });

  it('takes the change to winter time along', () => {
    // 25 October 2026, 02:00 summer time becomes 01:00: EU Directive 2000/84/EC, last Sunday in October, 01:00 UTC.
    const before = Date.UTC(2026, 9, 25, 0, 30, 0);
    expect(instantOfClock(clockSeconds('030000') ?? 0, before, 'Europe/London')).toBe(Date.UTC(2026, 9, 25, 3, 0, 0));
  });

  it('gives nothing for a time that the change to summer time leaves out', () => {
    // 29 March 2026, 01:00 becomes 02:00.
    expect(instantOfClock(clockSeconds('013000') ?? 0, Date.UTC(2026, 2, 29, 0, 45, 0), 'Europe/London')).toBeNull();
  });

  it('is read back by the clock of any zone', () => {
    const zones = ['UTC', 'Europe/London', 'Asia/Kathmandu', 'America/St_Johns', 'Pacific/Auckland'];
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 86_399 }), fc.constantFrom(...zones), (wanted, zone) => {
        const instant = instantOfClock(wanted, near, zone);
        if (instant === null) return;
        expect(clockSeconds(formatClock(instant, zone).replaceAll(':', ''))).toBe(wanted);
        expect(Math.abs(instant - near)).toBeLessThanOrEqual(12.5 * 3_600_000);
      }),
    );
  });

  it('is read back to the navigator with the shift and the wait', () => {
    const before = Date.UTC(2026, 5, 6, 9, 42, 30);
    expect(releaseWords(before + 210_000, before, near, 'Europe/London')).toBe('release 10:46:00, 3:30 later, in 6:00');
    expect(releaseWords(before, before, near, 'Europe/London')).toBe('release 10:42:30, in 2:30');
    expect(releaseWords(near - 5000, null, near, 'Europe/London')).toBe('release 10:39:55, 0:05 ago');
  });
});
