import { afterAll, describe, expect, it, vi } from 'vitest';
import { createRandom } from '#shared/drive/random.ts';
import { frameSentence } from '#shared/sensor/checksum.ts';
import { writeButton, writePps, writeWheel } from '#shared/sensor/sentence-writer.ts';
import { ofType, readAll } from '#tests/unit/sensor/reading.ts';
import {
  avrNote,
  canSimulate,
  compileFirmware,
  compilerNote,
  hasAvrCompiler,
  hasCompiler,
  hostProgram,
  makeFolder,
  type PinEvent,
  simulate,
  simulatorNote,
  sizeOf,
} from './tools.ts';

vi.setConfig({ testTimeout: 60_000 });

const folder = makeFolder();
afterAll(() => folder.remove());

const EDGES = [0, 1, 9, 10, 99, 100, 65_535, 65_536, 999_999_999, 2 ** 31 - 1, 2 ** 31, 2 ** 32 - 1];

describe.skipIf(!hasCompiler)(`parts of the pulse box that know no hardware${compilerNote}`, () => {
  const host = hasCompiler ? hostProgram(folder.path) : () => '';

  it('make the sentences that the reader reads, character by character', () => {
    const random = createRandom(1, 'counters');
    const any = (): number => Math.floor(random.range(0, 2 ** 32));
    const rows = [...EDGES, ...Array.from({ length: 500 }, any)].map((count, i) => ({ which: i % 256, count, us: EDGES[i] ?? any() }));
    const said = host(rows.flatMap(({ which, count, us }) => [`W ${which} ${count} ${us}`, `B ${which} ${count} ${us}`, `T ${us} 0 0`]));
    const expected = rows.map(({ which, count, us }) => writeWheel(which, count, us) + writeButton(which, count, us) + writePps(us));
    expect(said).toBe(expected.join(''));
    const { reader, observations } = readAll(said);
    expect([reader.goodLines, reader.garbledLines]).toEqual([3 * rows.length, 0]);
    expect(ofType(observations, 'pulse.v1').map((o) => o.count)).toEqual(rows.map((r) => r.count));
  });

  const numbers = (text: string): number[][] =>
    text
      .trim()
      .split('\n')
      .map((line) => line.split(' ').map(Number));

  it('count an edge once however it bounces, over the wrap of the microseconds too', () => {
    const base = 2 ** 32 - 10_000;
    const edges = Array.from({ length: 10 }, (_, i) => [i * 2000, i * 2000 + 40, i * 2000 + 230]).flat();
    const seen = numbers(host(edges.map((us) => `E ${(base + us) % 2 ** 32} 0 0`)));
    expect(seen.at(-1)).toEqual([10, (base + 18_000) % 2 ** 32]);
    expect(numbers(host(['E 0 0 0', 'E 249 0 0', 'E 250 0 0'])).at(-1)).toEqual([2, 250]);
  });

  it('take a contact that holds for a press, at the instant it first closed, and a glitch for none', () => {
    const looks: string[] = [];
    const hold = (closed: 0 | 1, fromMs: number, toMs: number): void => {
      for (let ms = fromMs; ms < toMs; ms += 1) looks.push(`C ${closed} ${ms * 1000} 0`);
    };
    hold(0, 0, 10);
    hold(1, 10, 13); // a glitch of the ignition
    hold(0, 13, 50);
    hold(1, 50, 52); // bounce, then a press
    hold(0, 52, 53);
    hold(1, 53, 200);
    hold(0, 200, 210); // the contact opens for too short a time
    hold(1, 210, 300);
    hold(0, 300, 400);
    hold(1, 400, 500);
    const seen = numbers(host(looks));
    expect(seen.map(([presses]) => presses).filter((p, i, all) => p !== all[i - 1])).toEqual([0, 1, 2]);
    expect(seen.find(([presses]) => presses === 1)).toEqual([1, 53_000]);
    expect(seen.at(-1)).toEqual([2, 400_000]);
  });

  it('tell microseconds without a step where the timer runs over', () => {
    const asked = ['U 7 65535 0', 'U 7 0 1', 'U 8 0 0', 'U 7 65535 1', 'U 131071 65535 0', 'U 131072 0 0'];
    expect(numbers(host(asked)).flat()).toEqual([8 * 32_768 - 1, 8 * 32_768, 8 * 32_768, 8 * 32_768 - 1, 2 ** 32 - 1, 0]);
  });
});

describe.skipIf(!hasAvrCompiler)(`firmware of the pulse box${avrNote}`, () => {
  it('compiles without a warning and fits the chip with half its memory free for the stack', () => {
    const { flash, memory } = sizeOf(compileFirmware(folder.path));
    console.info(`${flash} bytes of flash, ${memory} of memory`);
    expect(flash).toBeLessThan(30_720);
    expect(memory).toBeLessThan(1024);
  });
});

describe.skipIf(!canSimulate)(`firmware in a simulated chip${simulatorNote}`, () => {
  const END_US = 4_000_000;
  const low = (us: number, port: string, pin: number, forUs: number): PinEvent[] => [
    { us, port, pin, level: 0 },
    { us: us + forUs, port, pin, level: 1 },
  ];
  const RMC = frameSentence('GNRMC,120000.00,A,5130.00000,N,00007.00000,W,10.0,90.0,010626,,,A');

  function scene() {
    const idle: PinEvent[] = [...[2, 3].map((pin) => ({ us: 0, port: 'D', pin, level: 1 }))];
    idle.push(...[0, 1].map((pin) => ({ us: 0, port: 'C', pin, level: 1 })), { us: 0, port: 'B', pin: 0, level: 0 });
    // wheel 0 pulls away to 500 pulses a second, each edge bouncing; wheel 1 runs at 1900 a second
    const slow: number[] = [];
    for (let us = 500_000, period = 20_000; us < 3_000_000; us += period = Math.max(2000, period * 0.97)) slow.push(Math.round(us));
    const fast = Array.from({ length: 1900 }, (_, i) => 1_000_000 + Math.round((i * 1e6) / 1900));
    const pulses = [
      ...slow.flatMap((us) => [...low(us, 'D', 2, 30), ...low(us + 60, 'D', 2, 500)]),
      ...fast.flatMap((us) => low(us, 'D', 3, 100)),
    ];
    const pps = [1, 2, 3].flatMap((s) => [
      { us: s * 1_000_000 + 123_456, port: 'B', pin: 0, level: 1 },
      { us: s * 1_000_000 + 223_456, port: 'B', pin: 0, level: 0 },
    ]);
    const presses = [...low(1_500_000, 'C', 0, 700), ...low(1_501_000, 'C', 0, 80_000), ...low(2_500_000, 'C', 1, 80_000)];
    const receiver = [800_000, 1_800_000, 2_800_000].flatMap((from) =>
      [...`${RMC}\r\n`].map((c, i) => ({ us: from + i * 87, port: 'U', pin: 0, level: c.charCodeAt(0) })),
    );
    return { slow, fast, events: [...idle, ...pulses, ...pps, ...presses, ...receiver, { us: END_US, port: 'D', pin: 2, level: 1 }] };
  }

  it('counts every pulse, once, at its instant; tells presses and PPS edges; passes the receiver on', () => {
    const { slow, fast, events } = scene();
    const sent = simulate(folder.path, compileFirmware(folder.path), events);
    const { observations, reader } = readAll(sent.slice(sent.indexOf('$')));
    expect(reader.garbledLines).toBe(0);
    const wheel = (channel: number) => ofType(observations, 'pulse.v1').filter((o) => o.channel === channel);
    // the chip's clock begins some 0.3 ms after power: the first edge tells by how much
    const began = (slow[0] ?? 0) - (wheel(0).find((o) => o.count === 1)?.boxUs ?? Number.NaN);
    expect(began).toBeGreaterThan(0);
    expect(began).toBeLessThan(1000);
    for (const [channel, edges] of [slow, fast].entries()) {
      const moving = wheel(channel).filter((o, i, all) => o.count !== (all[i - 1]?.count ?? 0));
      expect(moving.at(-1)?.count).toBe(edges.length);
      const late = moving.map((o) => o.boxUs + began - (edges[o.count - 1] ?? Number.NaN));
      console.info(
        `channel ${channel}: ${edges.length} pulses, ${moving.length} sentences, late by ${Math.min(...late)} to ${Math.max(...late)} µs`,
      );
      // an edge waits for another interrupt to end, never longer
      for (const us of late) expect(Math.abs(us)).toBeLessThan(25);
      // at most fifty sentences a second
      expect(moving.length).toBeLessThanOrEqual(((moving.at(-1)?.boxUs ?? 0) - (moving[0]?.boxUs ?? 0)) / 20_000 + 2);
      // a sign of life each second, at rest too
      expect(wheel(channel).at(-1)?.boxUs).toBeGreaterThan(END_US - 1_100_000);
    }
    const pps = ofType(observations, 'pps.v1').map((o) => o.boxUs);
    expect(pps.slice(1).map((us, i) => us - (pps[i] ?? 0))).toEqual([expect.closeTo(1e6, -1), expect.closeTo(1e6, -1)]);
    const presses = (button: number) => ofType(observations, 'button.v1').filter((o) => o.button === button && o.presses === 1);
    for (const [button, us] of [1_500_000, 2_500_000].entries()) {
      const told = presses(button).filter((o) => o.boxUs === presses(button)[0]?.boxUs);
      expect(told).toHaveLength(3);
      expect(Math.abs((told[0]?.boxUs ?? 0) + began - us)).toBeLessThan(2100);
    }
    expect(sent.split(`${RMC}\r\n`)).toHaveLength(4);
    expect(ofType(observations, 'fix.v1').length).toBeGreaterThan(0);
  });
});
