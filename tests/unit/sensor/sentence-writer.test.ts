import fc from 'fast-check';
import { parseNmeaSentence } from 'nmea-simple';
import { describe, expect, it } from 'vitest';
import { judgeSentence } from '#shared/sensor/checksum.ts';
import { decodeNmea } from '#shared/sensor/nmea-sentence.ts';
import { decodePulse } from '#shared/sensor/pulse-sentence.ts';
import {
  type ReceiverState,
  writeButton,
  writeGga,
  writeGll,
  writePps,
  writeRmc,
  writeVtg,
  writeWheel,
  writeZda,
} from '#shared/sensor/sentence-writer.ts';
import { ofType, readAll } from '#tests/unit/sensor/reading.ts';

const uint32 = fc.integer({ min: 0, max: 2 ** 32 - 1 });
const receiver: fc.Arbitrary<ReceiverState> = fc.record({
  utcMs: fc.integer({ min: Date.UTC(1980, 0, 6), max: Date.UTC(2079, 11, 31) }),
  lat: fc.double({ min: -90, max: 90, noNaN: true }),
  lon: fc.double({ min: -180, max: 180, noNaN: true }),
  speed: fc.option(fc.double({ min: 0, max: 120, noNaN: true })),
  course: fc.option(fc.double({ min: 0, max: 359.99, noNaN: true })),
});
const body = (text: string): string => text.trimEnd().slice(1, -3);

describe('sentence writer', () => {
  it('writes pulses, presses and PPS edges that read back exactly', () => {
    fc.assert(
      fc.property(fc.nat(255), uint32, uint32, (which, count, boxUs) => {
        expect(decodePulse(body(writeWheel(which, count, boxUs)))).toEqual({ kind: 'wheel', channel: which, count, boxUs });
        expect(decodePulse(body(writeButton(which, count, boxUs)))).toEqual({ kind: 'button', button: which, presses: count, boxUs });
        expect(decodePulse(body(writePps(boxUs)))).toEqual({ kind: 'pps', boxUs });
      }),
    );
  });

  it('writes fixes that read back to the last printed digit', () => {
    fc.assert(
      fc.property(receiver, (r) => {
        for (const text of [writeRmc(r), writeGga(r), writeGll(r), writeVtg(r), writeZda(r.utcMs)])
          expect(judgeSentence(text.trimEnd())).toBe('ok');
        const { observations } = readAll(writeRmc(r) + writeGga(r) + writeVtg(r));
        const [fix] = ofType(observations, 'fix.v1');
        expect(fix?.utcMs).toBe(r.utcMs);
        expect(fix?.lat).toBeCloseTo(r.lat ?? Number.NaN, 8);
        expect(fix?.lon).toBeCloseTo(r.lon ?? Number.NaN, 8);
        if (r.speed === null) expect(fix?.speed).toBeNull();
        else expect(fix?.speed).toBeCloseTo(r.speed, 4);
        if (r.course === null) expect(fix?.course).toBeNull();
        else expect(Math.abs((fix?.course ?? 999) - r.course)).toBeLessThan(0.0051);
      }),
    );
  });

  it('is understood alike by another reader (nmea-simple)', () => {
    fc.assert(
      fc.property(receiver, (r) => {
        const rmc = parseNmeaSentence(writeRmc(r).trimEnd());
        if (rmc.sentenceId !== 'RMC') throw new Error('not an RMC');
        expect(rmc.latitude).toBeCloseTo(r.lat ?? Number.NaN, 8);
        expect(rmc.longitude).toBeCloseTo(r.lon ?? Number.NaN, 8);
        expect(rmc.status).toBe('valid');
        // That reader draws the line between 19yy and 20yy elsewhere, and reads no thousandths.
        if (r.utcMs > Date.UTC(2000, 0, 1) && r.utcMs < Date.UTC(2070, 0, 1))
          expect(rmc.datetime.getTime()).toBe(Math.floor(r.utcMs / 1000) * 1000);
        const gga = parseNmeaSentence(writeGga(r).trimEnd());
        expect(gga).toMatchObject({ sentenceId: 'GGA', fixType: 'fix' });
      }),
    );
  });

  it('leaves out what is not known', () => {
    const dark: ReceiverState = { utcMs: Date.UTC(2026, 0, 1), lat: null, lon: null, speed: null, course: null };
    expect(writeRmc(dark)).toContain('GNRMC,000000.000,V,,,,,,,010126,,,N*');
    expect(decodeNmea(body(writeGga(dark)))).toMatchObject({ valid: false, lat: null, lon: null });
    expect(decodeNmea(body(writeVtg(dark)))).toEqual({ kind: 'vtg', speed: null, course: null });
  });
});
