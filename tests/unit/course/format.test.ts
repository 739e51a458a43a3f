import { describe, expect, it } from 'vitest';
import { formatClock, formatDistance, formatDuration, formatSpeed, formatTimeError } from '#shared/course/format.ts';

describe('text of quantities', () => {
  it('distance in the unit of the book', () => {
    expect(formatDistance(12_345, 'km', 3)).toBe('12.345');
    expect(formatDistance(12_345, 'km', 1)).toBe('12.3');
    expect(formatDistance(1609.344 * 2.5, 'mi', 2)).toBe('2.50');
    expect(formatDistance(-12, 'km', 3)).toBe('−0.012');
    expect(formatDistance(-0.2, 'km', 2)).toBe('0.00');
  });

  it('speed to the whole unit', () => {
    expect(formatSpeed(50, 'km/h')).toBe('180');
    expect(formatSpeed(50, 'mph')).toBe('112');
  });

  it('time error: a magnitude and a word; hundredths rounded from whole microseconds', () => {
    expect(formatTimeError(0.004999, 2)).toEqual({ magnitude: '0.00', word: 'level' });
    expect(formatTimeError(0.005, 2)).toEqual({ magnitude: '0.01', word: 'late' });
    expect(formatTimeError(-0.005, 2)).toEqual({ magnitude: '0.01', word: 'early' });
    expect(formatTimeError(0.994999, 2)).toEqual({ magnitude: '0.99', word: 'late' });
    expect(formatTimeError(-0.000001, 2)).toEqual({ magnitude: '0.00', word: 'level' });
    expect(formatTimeError(1.005, 2).magnitude).toBe('1.01');
    expect(formatTimeError(-12.34, 1)).toEqual({ magnitude: '12.3', word: 'early' });
  });

  it('durations', () => {
    expect(formatDuration(59.96, 1)).toBe('1:00.0');
    expect(formatDuration(3723.4)).toBe('1:02:03');
    expect(formatDuration(-5)).toBe('−0:05');
    expect(formatDuration(-0.2)).toBe('0:00');
  });

  it('civil clock in the event’s zone, cut', () => {
    const ms = Date.UTC(2027, 5, 1, 9, 41, 59, 987);
    expect(formatClock(ms, 'Europe/Dublin')).toBe('10:41:59');
    expect(formatClock(ms, 'Europe/Dublin', 2)).toBe('10:41:59.98');
    expect(formatClock(ms, 'America/Denver', 3)).toBe('03:41:59.987');
    expect(formatClock(Date.UTC(2027, 0, 1, 0, 0, 0), 'UTC')).toBe('00:00:00');
  });
});
