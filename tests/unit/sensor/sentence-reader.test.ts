import { describe, expect, it } from 'vitest';
import { frameSentence } from '#shared/sensor/checksum.ts';
import { createSentenceReader } from '#shared/sensor/sentence-reader.ts';
import { bytesOf, ofType, readAll } from '#tests/unit/sensor/reading.ts';

const lines = (...bodies: string[]): string => bodies.map((body) => `${frameSentence(body)}\r\n`).join('');
const KNOT = 1852 / 3600;

describe('pulse sentences', () => {
  it('become pulses, presses and PPS edges with their raw counters', () => {
    const { observations, reader } = readAll(lines('PEVLW,1,4294967295,1000', 'PEVLB,0,3,1500', 'PEVLT,2000'));
    expect(observations).toEqual([
      { type: 'pulse.v1', at: 1_000_000, channel: 1, count: 4_294_967_295, boxUs: 1000 },
      // The first lines of a box: nothing is known yet but that none can have come before it happened.
      { type: 'button.v1', at: 1_000_000, button: 0, presses: 3, boxUs: 1500 },
      { type: 'pps.v1', at: 1_000_000, boxUs: 2000 },
    ]);
    expect([reader.goodLines, reader.garbledLines]).toEqual([3, 0]);
  });

  it.each([
    'PEVLW,1,4294967296,5',
    'PEVLW,256,1,5',
    'PEVLW,1,-1,5',
    'PEVLW,1,1.5,5',
    'PEVLW,,1,5',
    'PEVLW,1,1',
    'PEVLW,1,1,5,6',
    'PEVLX,1,1,5',
    'PEVLT,',
  ])('drops %s although its checksum fits', (body) => {
    const { observations, reader } = readAll(lines(body));
    expect(observations).toEqual([]);
    expect([reader.goodLines, reader.garbledLines]).toEqual([0, 1]);
  });

  it('survives text, binary and a lost line end around it', () => {
    const pulse = frameSentence('PEVLW,0,7,100');
    const noise = `boot v1.2\n\xb5\x62\x01\x07\x5c\0${pulse}${pulse}\r${pulse.slice(0, 9)}${pulse}\n${'x'.repeat(5000)}\n${pulse}\n`;
    const { observations, reader } = readAll(noise);
    expect(ofType(observations, 'pulse.v1')).toHaveLength(4);
    expect([reader.goodLines, reader.garbledLines]).toEqual([4, 4]);
  });

  it('drops a sentence longer than any real one, whatever its checksum', () => {
    const { observations } = readAll(lines(`PEVLT,${'0'.repeat(300)}5`));
    expect(observations).toEqual([]);
  });
});

describe('fixes', () => {
  const GLL = 'GNGLL,3725.5836211,N,12205.6191522,W,021417.00,A,A';
  const RMC = 'GNRMC,021417.00,A,3725.58362,N,12205.61915,W,10.000,65.13,070220,,,A';
  const VTG = 'GNVTG,65.13,T,52.07,M,10.000,N,18.520,K,D';
  const GGA = 'GNGGA,021417.00,3725.5836211,N,12205.6191522,W,4,12,0.76,4.4,M,-30.0,M,0.0,2000';

  it('are one for the RMC, VTG and GGA of an epoch, with the finest position', () => {
    const [fix, ...more] = ofType(readAll(lines(RMC, VTG, GGA)).observations, 'fix.v1');
    expect(more).toEqual([]);
    expect(fix).toMatchObject({ at: 1_000_000, via: 'nmea', course: 65.13, utcMs: Date.UTC(2020, 1, 7, 2, 14, 17) });
    // RTK: twice 0.76 x 0.4 m
    expect(fix?.accuracy).toBeCloseTo(0.608, 6);
    expect(fix?.lat).toBeCloseTo(37 + 25.5836211 / 60, 10);
    expect(fix?.lon).toBeCloseTo(-(122 + 5.6191522 / 60), 10);
    expect(fix?.speed).toBeCloseTo(10 * KNOT, 9);
  });

  it('come out at the last sentence of the burst once the burst is known, stamped with its first', () => {
    const reader = createSentenceReader();
    const at = (body: string, us: number) => ofType(reader.push(bytesOf(lines(body)), us), 'fix.v1');
    expect([...at(RMC, 0), ...at(GGA, 10_000)]).toEqual([]);
    expect(at(RMC.replace('021417', '021418'), 1_000_000)).toHaveLength(1);
    expect(at(GGA.replace('021417', '021418'), 1_010_000)).toMatchObject([{ at: 1_000_000 }]);
  });

  it('take speed from VTG where there is no RMC, and have none where there is neither', () => {
    const [withVtg] = ofType(readAll(lines(GGA, VTG)).observations, 'fix.v1');
    expect(withVtg?.speed).toBeCloseTo(10 * KNOT, 9);
    const [without] = ofType(readAll(lines(GGA)).observations, 'fix.v1');
    expect(without).toMatchObject({ speed: null, course: null, utcMs: null });
  });

  it('give VTG to the next epoch where a receiver sends it first', () => {
    const later = GGA.replace('021417', '021418');
    const slow = 'GNVTG,65.13,T,,M,1.000,N,1.852,K,D';
    const fixes = ofType(readAll(lines(VTG, GGA, slow, later)).observations, 'fix.v1');
    expect(fixes.map((fix) => fix.speed?.toFixed(6))).toEqual([(10 * KNOT).toFixed(6), KNOT.toFixed(6)]);
  });

  it('never use a speed of another epoch', () => {
    const reader = createSentenceReader();
    reader.push(bytesOf(lines(RMC, VTG)), 0);
    const fixes = ofType(
      [...reader.push(bytesOf(lines(VTG)), 700_000), ...reader.push(bytesOf(lines(GGA.replace('021417', '021418'))), 1_100_000)],
      'fix.v1',
    );
    const rest = ofType(reader.push(new Uint8Array(), 2_000_000), 'fix.v1');
    expect([...fixes, ...rest].at(-1)?.speed).toBeNull();
  });

  it('missing fields are null, never 0', () => {
    const [fix] = ofType(readAll(lines('GPRMC,021417.00,A,3725.58362,N,12205.61915,W,,,070220,,,A')).observations, 'fix.v1');
    expect(fix).toMatchObject({ speed: null, course: null });
    const [nowhere] = ofType(readAll(lines('GPRMC,,A,,,,,,,,,,A')).observations, 'fix.v1');
    expect(nowhere).toMatchObject({ lat: null, lon: null, speed: null, course: null, utcMs: null });
  });

  it.each([
    ['status V', 'GPRMC,021417.00,V,3725.58362,N,12205.61915,W,10.0,65.1,070220,,,N'],
    ['mode N', 'GPRMC,021417.00,A,3725.58362,N,12205.61915,W,10.0,65.1,070220,,,N'],
    ['mode typed in by hand', 'GPRMC,021417.00,A,3725.58362,N,12205.61915,W,10.0,65.1,070220,,,M'],
    ['quality typed in by hand', 'GPGGA,021417.00,3725.5836211,N,12205.6191522,W,7,00,99.9,,M,,M,,'],
    ['quality simulated', 'GPGGA,021417.00,3725.5836211,N,12205.6191522,W,8,12,0.9,,M,,M,,'],
    ['GLL mode N', 'GLGLL,3725.5836211,N,12205.6191522,W,021417.00,A,N'],
    ['quality 0', 'GPGGA,021417.00,3725.5836211,N,12205.6191522,W,0,00,99.9,,M,,M,,'],
  ])('without a fix (%s) have no place, speed or time', (_, body) => {
    const { observations } = readAll(lines(body));
    expect(observations).toMatchObject([{ type: 'fix.v1', lat: null, lon: null, speed: null, utcMs: null }]);
  });

  it('believe the sentence that says there is none', () => {
    const [fix] = ofType(readAll(lines(RMC, GGA.replace(',4,12,', ',0,00,'))).observations, 'fix.v1');
    expect(fix).toMatchObject({ lat: null, lon: null, speed: null });
  });

  it.each(['GP', 'GN', 'GL', 'GA', 'GB', 'GQ', 'BD', 'QZ', 'GI', 'II'])('are read of talker %s', (talker) => {
    const texts = [RMC, VTG, GGA].map((body) => body.replace('GN', talker));
    expect(ofType(readAll(lines(...texts)).observations, 'fix.v1')).toMatchObject([
      { course: 65.13, lat: expect.closeTo(37.426393685, 8) },
    ]);
  });

  it('have no accuracy where the receiver knows none, and more where it has an ordinary fix', () => {
    const accuracy = (body: string) => ofType(readAll(lines(body)).observations, 'fix.v1')[0]?.accuracy;
    expect(accuracy(GGA.replace(',0.76,', ',,'))).toBeNull();
    expect(accuracy(GGA.replace(',0.76,', ',99.99,'))).toBeNull();
    expect(accuracy(GGA.replace(',4,12,0.76,', ',1,12,1.00,'))).toBeCloseTo(6, 9);
    expect(accuracy(GLL)).toBeNull();
  });

  it('are whole of a receiver that sends only GLL, whose date nobody knows', () => {
    const [fix] = ofType(readAll(lines(GLL)).observations, 'fix.v1');
    expect(fix).toMatchObject({ speed: null, utcMs: null, lat: expect.closeTo(37.426393685, 8) });
  });

  it.each([
    ['after its GGA', false],
    ['before its GGA', true],
  ])('keep speed and place of one epoch together at 10 Hz when lines are lost, VTG %s', (_, leads) => {
    const reader = createSentenceReader();
    const tenth = (k: number): string => `${String(21417 + Math.floor(k / 10)).padStart(6, '0')}.${k % 10}0`;
    const sent = Array.from({ length: 60 }, (_, k) => {
      const gga = GGA.replace('021417.00', tenth(k));
      const speed = `GNVTG,65.13,T,,M,${k}.000,N,,K,D`;
      const pair = leads ? [speed, gga] : [gga, speed];
      return pair.map((body, i) => ({ k, body, us: k * 100_000 + i * 5000 }));
    }).flat();
    // four epochs in, the habit is known; then every seventh line is lost
    const heard = sent.filter((_, i) => i < 16 || i % 7 !== 0);
    const fixes = heard.flatMap(({ body, us }) => ofType(reader.push(bytesOf(lines(body)), us), 'fix.v1'));
    const later = fixes.filter((fix) => fix.speed !== null);
    expect(later.length).toBe(45);
    // the arrival of the fix tells its epoch, the speed tells the VTG's
    for (const fix of later) expect(Math.round((fix.speed ?? -1) / KNOT)).toBe(Math.floor(fix.at / 100_000));
  });

  it('ignore proprietary sentences that end like standard ones', () => {
    expect(readAll(lines('PXRMC,021417.00,A,3725.58362,N,12205.61915,W,10.0,65.1,070220')).observations).toEqual([]);
  });
});

describe('dates', () => {
  const rmc = (time: string, date: string): string => `GPRMC,${time},A,3725.58362,N,12205.61915,W,1.0,65.1,${date},,,A`;
  const utc = (text: string, dateFloorMs: number | null = null): (string | null)[] =>
    ofType(readAll(text, { dateFloorMs }).observations, 'fix.v1').map((fix) =>
      fix.utcMs === null ? null : new Date(fix.utcMs).toISOString(),
    );

  // 7 April 2019 00:00:00 was the first instant after the second rollover of the ten-bit week (IS-GPS-200; US Coast Guard notice).
  it('get the lost 1024 weeks back', () => {
    expect(utc(lines(rmc('000425.00', '220899')), Date.UTC(2019, 0, 1))).toEqual(['2019-04-07T00:04:25.000Z']);
    expect(utc(lines(rmc('000425.00', '220899')))).toEqual(['1999-08-22T00:04:25.000Z']);
    expect(utc(lines(rmc('000425.00', '070419')), Date.UTC(2025, 0, 1))).toEqual(['2019-04-07T00:04:25.000Z']);
  });

  it('are carried over midnight to sentences that have none', () => {
    const gga = 'GPGGA,000000.50,3725.5836211,N,12205.6191522,W,1,08,1.0,,M,,M,,';
    expect(utc(lines(rmc('235959.50', '311220'), gga))).toEqual(['2020-12-31T23:59:59.500Z', '2021-01-01T00:00:00.500Z']);
  });

  it('may go back', () => {
    expect(utc(lines(rmc('152508.50', '091209'), rmc('143306.50', '091209')))).toEqual([
      '2009-12-09T15:25:08.500Z',
      '2009-12-09T14:33:06.500Z',
    ]);
  });

  it.each(['250000.00', '126000.00', '12000', ''])('time %j is no time', (time) => {
    expect(utc(lines(rmc(time, '091209')))).toEqual([null]);
  });

  it('30 February is no date', () => expect(utc(lines(rmc('120000.00', '300220')))).toEqual([null]));
});

describe('clock samples', () => {
  const zda = (second: number): string => {
    const t = new Date(Date.UTC(2026, 5, 1, 12, 0, 0) + second * 1000).toISOString();
    return lines(`GPZDA,${t.slice(11, 13)}${t.slice(14, 16)}${t.slice(17, 19)}.00,01,06,2026,00,00`);
  };

  it('come from RMC and ZDA, at once and then of windows of 10, 20, 40, 60 s, on the least delay seen', () => {
    const reader = createSentenceReader();
    const offsetMs = 40_000;
    // Sentence k leaves the receiver 150 ms after its second and is jittered by 0..60 ms more, never less.
    const samples = Array.from({ length: 140 }, (_, k) => {
      const jitter = (k * 37) % 61;
      return ofType(reader.push(bytesOf(zda(k)), (k * 1000 + offsetMs + 150 + jitter) * 1000), 'clock.v1');
    }).flat();
    const gaps = samples.slice(1).map((s, i) => (s.at - (samples[i]?.at ?? 0)) / 1e6);
    for (const [i, least] of [10, 20, 40, 60].entries()) expect(gaps[i]).toBeGreaterThanOrEqual(least);
    for (const [i, most] of [12, 22, 42, 62].entries()) expect(gaps[i]).toBeLessThan(most);
    const errors = samples.map((s) => s.officialMs - (Date.UTC(2026, 5, 1, 12, 0, 0) + s.at / 1000 - offsetMs));
    for (const [i, sample] of samples.entries()) {
      expect(sample.source).toBe('nmea');
      expect(Math.abs(errors[i] ?? 99)).toBeLessThan(sample.uncertaintyMs);
      expect(sample.uncertaintyMs).toBeGreaterThanOrEqual(80);
    }
    expect(Math.abs(errors.at(-1) ?? 99)).toBeLessThan(6);
    expect(samples[0]?.uncertaintyMs).toBeGreaterThan(samples[1]?.uncertaintyMs ?? 0);
  });

  it('start afresh when the receiver sets its clock', () => {
    const reader = createSentenceReader();
    for (let k = 0; k < 20; k += 1) reader.push(bytesOf(zda(k)), k * 1e6);
    const [sample] = ofType(reader.push(bytesOf(zda(20 - 3120)), 20e6), 'clock.v1');
    expect(sample?.officialMs).toBe(Date.UTC(2026, 5, 1, 12, 0, 20) - 3_120_000 + 150);
  });

  it('are not made of a time without a fix', () => {
    const dark = 'GPRMC,120000.00,V,,,,,,,010626,,,N';
    expect(readAll(lines(dark, 'GPZDA,120000.00,01,06,2026,00,00')).observations.map((o) => o.type)).toEqual(['fix.v1']);
  });
});
