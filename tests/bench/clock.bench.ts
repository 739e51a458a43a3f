import type { Random } from '#shared/drive/random.ts';
import { addToHull, hullLine, makeLowerHull } from '#shared/lower-hull.ts';
import { takePps } from '#shared/pace/clock-hear.ts';
import { ownRhythm, tapSetOf } from '#shared/pace/clock-taps.ts';
import { createClockSampler } from '#shared/sensor/clock-sampler.ts';
import { createSentenceReader } from '#shared/sensor/sentence-reader.ts';
import { writePps, writeRmc, writeWheel } from '#shared/sensor/sentence-writer.ts';
import { leastDelay } from '#src/run/official-clock.ts';
import {
  crystal,
  EPOCH_MS,
  exchanges,
  Fed,
  randomOf,
  secondBegins,
  sentenceJitter,
  type Tally,
  tally,
  WAYS,
  type Way,
} from './clock-model.ts';
import type { Bench, Figure } from './figures.ts';

/**
 * Errors of the official clock, ms, by the functions that run in the car: RMS, 95 %, and the share within two stated sigma. `page`
 * stands beside the figures for which the design's own table makes a claim (a prototype's, RMS). Seeded.
 */
type Row = Record<string, Figure | number>;

export const bench: Bench = ({ quick }) => {
  const rounds = quick ? 200 : 1000;
  return {
    ...exchangeRows(rounds),
    ...envelopeRows(rounds),
    ...ppsRows(rounds),
    ...sentenceRows(rounds),
    ...tapRows(rounds),
    ...combinedRows(rounds),
    ...holdoverRows(quick ? 200 : 400),
  };
};

const ms = (value: number): Figure => ({ value, unit: 'ms' });

function rows(name: string, found: Tally, page: number | null, stated = true): Row {
  return {
    [`${name}, RMS`]: ms(found.rms),
    ...(page === null ? {} : { [`${name}, RMS, page`]: ms(page) }),
    [`${name}, 95 %`]: ms(found.p95),
    ...(stated ? { [`${name}, within 2σ`]: { value: found.covered, unit: '%', atLeast: 93 } } : {}),
  };
}

function many(name: string, rounds: number, once: (random: Random, found: Tally) => void): Tally {
  const found = tally();
  for (let i = 0; i < rounds; i++) once(randomOf(name, i), found);
  return found;
}

const PAGE_EXCHANGE: Readonly<Record<keyof typeof WAYS, number>> = { 'Wi-Fi': 0.45, '4G': 4.4, 'poor 4G': 14 };

function exchangeRows(rounds: number): Row {
  const all: Row = {};
  for (const [name, way] of Object.entries(WAYS) as [keyof typeof WAYS, Way][]) {
    const mean = tally();
    const least = many(name, rounds * 4, (random, found) => {
      const list = exchanges(random, way, random.gauss(way.asymmetry));
      const best = leastDelay(list);
      if (best !== null) found.add(best.offset, best.sigma);
      mean.add(list.reduce((sum, { offset }) => sum + offset, 0) / list.length);
    });
    Object.assign(all, rows(`exchange ${name}, least delay`, least, PAGE_EXCHANGE[name]));
    Object.assign(all, rows(`exchange ${name}, mean`, mean, name === '4G' ? 9.4 : null, false));
  }
  return all;
}

/** The envelope alone, at its end, of messages a second apart. */
const envelope = (name: string, rounds: number, seconds: number, jitter: (random: Random) => number): Tally =>
  many(`envelope ${name}`, rounds, (random, found) => {
    const slope = random.range(-0.05, 0.05);
    const hull = makeLowerHull();
    for (let i = 0; i < seconds; i++) addToHull(hull, i, slope * i + jitter(random));
    const line = hullLine(hull, 0.1);
    if (line !== null) found.add(line.y + line.slope * (seconds - line.x) - slope * seconds);
  });

/** The sentences' constant latency is left out. */
function envelopeRows(rounds: number): Row {
  return {
    ...rows('sentence envelope 60 s', envelope('60', rounds, 60, sentenceJitter), 3.8, false),
    ...rows('sentence envelope 300 s', envelope('300', rounds, 300, sentenceJitter), 1.8, false),
  };
}

const PAGE_PPS: Readonly<Record<string, number>> = { '10,60': 1, '4,60': 0.5, '1,60': 0.24, '10,300': 0.36, '4,300': 0.22, '1,300': 0.11 };

/** Edges polled every so many ms, on a coarse second told by a poor exchange. The stated sigma allows 1.5 ms for the wire, which is in the last rows only. */
function ppsRows(rounds: number): Row {
  const all: Row = {};
  for (const poll of [10, 4, 1]) {
    const alone = (seconds: number): Tally => envelope(`pps alone ${poll}`, rounds, seconds, (random) => random.range(0, poll));
    for (const seconds of [60, 300])
      Object.assign(
        all,
        rows(`PPS polled ${poll} ms, ${seconds} s, envelope alone`, alone(seconds), PAGE_PPS[`${poll},${seconds}`] ?? null, false),
      );
    for (const seconds of [75, 315]) {
      const found = many(`pps ${poll} ${seconds}`, rounds, (random, sum) => {
        const device = crystal(random, 50);
        const fed = new Fed();
        fed.exchange(random, WAYS['poor 4G'], random.gauss(25), 0, 0);
        for (let k = 1; k <= seconds; k++) fed.edge(secondBegins(k, device.offsetAt(k)), random.range(0, poll));
        const { error, sigma } = fed.errorAt(seconds, device.offsetAt(seconds));
        sum.add(error, sigma);
      });
      Object.assign(all, rows(`PPS polled ${poll} ms, ${seconds} s, clock`, found, null));
    }
  }
  const boxed = many('box', Math.ceil(rounds / 10), (random, sum) => {
    const device = crystal(random, 50);
    const fed = new Fed();
    throughBox(fed, random, device.offsetAt, 130);
    const { error, sigma } = fed.errorAt(130, device.offsetAt(130));
    sum.add(error, sigma);
  });
  return { ...all, ...rows('PPS and sentences of one box on a wire, 130 s', boxed, null) };
}

/**
 * Bytes of a pulse box: 50 wheel lines a second, the edge and the receiver's RMC a second, on a wire of 0.5..2.5 ms and a port
 * read every 16 ms. No exchange: the sentences, late by 150 ms or so, tell the second.
 */
function throughBox(fed: Fed, random: Random, offsetAt: (t: number) => number, seconds: number): void {
  const reader = createSentenceReader();
  const encoder = new TextEncoder();
  const [ppm, wire, latency] = [random.range(-50, 50), random.range(0.0005, 0.0025), Math.max(0.02, 0.15 + random.gauss(0.08))];
  const boxUs = (t: number): number => Math.floor(1e6 + t * 1e6 * (1 + ppm * 1e-6));
  const lines: { readonly t: number; readonly line: string }[] = [];
  for (let i = 0; i < seconds * 50; i++) lines.push({ t: i / 50, line: writeWheel(0, i, boxUs(i / 50)) });
  for (let k = 1; k < seconds; k++) {
    const t = secondBegins(k, offsetAt(k));
    lines.push({ t, line: writePps(boxUs(t)) });
    const utcMs = EPOCH_MS + k * 1000;
    lines.push({ t: t + latency, line: writeRmc({ utcMs, lat: 50, lon: 7, speed: 0, course: 0 }) });
  }
  for (const { t, line } of lines.toSorted((a, b) => a.t - b.t)) {
    const arrival = Math.round((t + wire + random.range(0, 0.016)) * 1e6);
    for (const o of reader.push(encoder.encode(line), arrival)) {
      if (o.type === 'pps.v1') takePps(fed.clock, o.at, o.at, false);
      if (o.type === 'clock.v1') fed.offer(o.at / 1e6, o.source, o.officialMs, o.uncertaintyMs);
    }
  }
}

function sentences(fed: Fed, random: Random, offsetAt: (t: number) => number, latency: number, from: number, to: number): void {
  const sampler = createClockSampler();
  for (let k = from; k <= to; k++) {
    const t = secondBegins(k, offsetAt(k)) + (latency + sentenceJitter(random)) / 1000;
    for (const o of sampler.take(EPOCH_MS + k * 1000, t * 1e6)) fed.offer(o.at / 1e6, 'nmea', o.officialMs, o.uncertaintyMs);
  }
}

function sentenceRows(rounds: number): Row {
  const raw = many('sentences', rounds, (random, found) => {
    const device = crystal(random, 50);
    const fed = new Fed();
    sentences(fed, random, device.offsetAt, 150 + random.gauss(80), 0, 140);
    const { error, sigma } = fed.errorAt(141, device.offsetAt(141));
    found.add(error, sigma);
  });
  const learnt = many('calibrated', rounds, (random, found) => {
    const device = crystal(random, 50);
    const fed = new Fed();
    const latency = 150 + random.gauss(80);
    fed.exchange(random, WAYS['Wi-Fi'], random.gauss(0.8), 0, 0);
    sentences(fed, random, device.offsetAt, latency, 1, 1800);
    const { error, sigma } = fed.errorAt(1801, device.offsetAt(1801));
    found.add(error, sigma);
  });
  return { ...rows('sentences, latency unknown', raw, 80), ...rows('sentences 30 min after a check by Wi-Fi', learnt, null) };
}

/** Touches along a clock whose seconds begin at whole session seconds: a bias of the person, scatter, and what another display adds. */
function touches(random: Random, n: number, bias: number): number[] {
  return Array.from({ length: n }, (_, i) => Math.round((i + 1) * 1e6 + (bias + random.gauss(26)) * 1000));
}

function tapError(random: Random, own: boolean): { error: number; sigma: number } {
  const bias = random.gauss(30);
  const rhythm = own ? ownRhythm(touches(random, 15, bias), 0) : null;
  const set = tapSetOf(touches(random, 10, bias + random.gauss(12)), rhythm ?? undefined);
  if (set === null) return { error: Number.NaN, sigma: Number.NaN };
  return { error: set.at / 1000 - 10_000, sigma: set.sigmaMs };
}

function tapRows(rounds: number): Row {
  const run = (own: boolean): Tally =>
    many(`taps ${own}`, rounds * 4, (random, found) => {
      const { error, sigma } = tapError(random, own);
      if (!Number.isNaN(error)) found.add(error, sigma);
    });
  return { ...rows('10 taps in rhythm', run(false), 32), ...rows('10 taps, own rhythm taken off', run(true), 18) };
}

function combinedRows(rounds: number): Row {
  const found = many('combined', rounds * 2, (random, sum) => {
    const fed = new Fed();
    fed.exchange(random, WAYS['4G'], random.gauss(8), 0, 0);
    const { error, sigma } = tapError(random, true);
    if (!Number.isNaN(error)) fed.offer(1, 'tap', EPOCH_MS + 1000 - error, sigma);
    const now = fed.errorAt(1, 0);
    sum.add(now.error, now.sigma);
  });
  return rows('4G and taps together', found, 4.3);
}

/** Offline from `until` on; the errors after so many minutes. */
const AFTER = [10, 30, 60] as const;

interface Holdover {
  readonly page: readonly [number, number, number];
  readonly until: number;
  feed(fed: Fed, random: Random, offsetAt: (t: number) => number): void;
}

const every = (from: number, to: number, step: number): number[] =>
  Array.from({ length: Math.floor((to - from) / step) + 1 }, (_, i) => from + i * step);

const by4G =
  (until: number): Holdover['feed'] =>
  (fed, random, offsetAt) => {
    const skew = random.gauss(WAYS['4G'].asymmetry);
    for (const t of every(0, until, 300)) fed.exchange(random, WAYS['4G'], skew, t, offsetAt(t));
  };

function byTaps(fed: Fed, random: Random, offsetAt: (t: number) => number): void {
  const bias = random.gauss(30);
  for (const t of [0, 1800]) {
    const set = tapSetOf(touches(random, 10, bias + random.gauss(12)));
    if (set !== null) fed.offer(t, 'tap', EPOCH_MS + t * 1000 + offsetAt(t) - (set.at / 1000 - 10_000), set.sigmaMs);
  }
}

const HOLDOVERS: Readonly<Record<string, Holdover>> = {
  'PPS 20 min': {
    page: [0.9, 2.3, 4.7],
    until: 1210,
    feed(fed, random, offsetAt) {
      fed.exchange(random, WAYS['4G'], random.gauss(8), 0, 0);
      for (const k of every(1, 1210, 1)) fed.edge(secondBegins(k, offsetAt(k)), random.range(0, 4));
    },
  },
  'sentence 20 min, latency known': {
    page: [1.8, 3.9, 7.3],
    until: 1210,
    feed(fed, random, offsetAt) {
      const skew = random.gauss(WAYS['Wi-Fi'].asymmetry);
      fed.exchange(random, WAYS['Wi-Fi'], skew, 0, 0);
      sentences(fed, random, offsetAt, 150 + random.gauss(80), 1, 1210);
      fed.exchange(random, WAYS['Wi-Fi'], skew, 1210, offsetAt(1210));
    },
  },
  '4G 20 min': { page: [5.6, 8.7, 14], until: 1200, feed: by4G(1200) },
  '4G 60 min': { page: [4.5, 5.4, 7.6], until: 3600, feed: by4G(3600) },
  'two tap sets 30 min apart': { page: [29, 44, 68], until: 1800, feed: byTaps },
  'no rate': {
    page: [17, 52, 104],
    until: 0,
    feed: (fed, random) => fed.exchange(random, WAYS['Wi-Fi'], random.gauss(0.8), 0, 0),
  },
};

function holdoverRows(rounds: number): Row {
  const all: Row = {};
  for (const [name, { page, until, feed }] of Object.entries(HOLDOVERS)) {
    const found = AFTER.map(() => tally());
    for (let i = 0; i < rounds; i++) {
      const random = randomOf(`holdover ${name}`, i);
      const device = crystal(randomOf(`crystal ${name}`, i), 50, until);
      const fed = new Fed();
      feed(fed, random, device.offsetAt);
      for (const [j, minutes] of AFTER.entries()) {
        const t = until + minutes * 60;
        const { error, sigma } = fed.errorAt(t, device.offsetAt(t));
        found[j]?.add(error, sigma);
      }
    }
    for (const [j, minutes] of AFTER.entries())
      Object.assign(all, rows(`${minutes} min after ${name}`, found[j] as Tally, page[j] as number));
  }
  return all;
}
