import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { padTime } from '#src/paddock/event/release-form.tsx';
import { dateInZone, timeInZone, zonedInstant } from '#src/paddock/event/zoned-instant.ts';

const ZONES = ['Europe/Vienna', 'America/Los_Angeles', 'Asia/Kolkata', 'Australia/Lord_Howe', 'Pacific/Kiritimati', 'UTC'];

describe('zoned instant', () => {
  it('reads a start list in the zone of the event', () => {
    expect(zonedInstant('2026-06-13', '10:42:00', 'Europe/Vienna')).toBe(Date.UTC(2026, 5, 13, 8, 42));
    expect(zonedInstant('2026-01-13', '10:42:00', 'Europe/Vienna')).toBe(Date.UTC(2026, 0, 13, 9, 42));
    expect(zonedInstant('2026-06-13', '10:42:00', 'Asia/Kolkata')).toBe(Date.UTC(2026, 5, 13, 5, 12));
  });

  // Directive 2000/84/EC: summer time begins at 01:00 UTC on the last Sunday of March and ends on the last of October.
  it('knows no instant for a time of day that the clocks skip', () => {
    expect(zonedInstant('2026-03-29', '02:30:00', 'Europe/Vienna')).toBeNull();
    expect(zonedInstant('2026-03-29', '03:00:00', 'Europe/Vienna')).toBe(Date.UTC(2026, 2, 29, 1));
  });

  it('takes the earlier of two instants where the clocks repeat an hour', () => {
    expect(zonedInstant('2026-10-25', '02:30:00', 'Europe/Vienna')).toBe(Date.UTC(2026, 9, 25, 0, 30));
  });

  it('is the inverse of reading the clock, save for the hour that comes twice', () => {
    const seconds = fc.integer({ min: 946_684_800, max: 4_102_444_799 });
    fc.assert(
      fc.property(seconds, fc.constantFrom(...ZONES), (s, zone) => {
        const back = zonedInstant(dateInZone(s * 1000, zone), timeInZone(s * 1000, zone), zone);
        expect(back === s * 1000 || back === s * 1000 - 3_600_000 || back === s * 1000 - 1_800_000).toBe(true);
        expect(timeInZone(back ?? 0, zone)).toBe(timeInZone(s * 1000, zone));
      }),
    );
  });

  it('refuses what is no date', () => {
    expect(zonedInstant('2026-02-31x', '10:00:00', 'UTC')).toBeNull();
    expect(padTime('9:05')).toBe('09:05:00');
  });
});
