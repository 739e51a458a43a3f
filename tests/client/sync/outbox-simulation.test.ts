// @vitest-environment node
import fc from 'fast-check';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { addRun, type Device, type DeviceRun } from './memory-outbox-store.ts';
import { bytesOfBlocks, sampleBlocks, sampleHeader } from './sample-runs.ts';
import { createServerDouble } from './server-double.ts';
import { CHUNK_LIMIT, openPage, type Traffic, type Weather } from './simulated-client.ts';
import { createWorld } from './simulated-world.ts';

const SEEDS = Number(process.env['SYNC_SEEDS'] ?? 500);
const GRANT = 'g'.repeat(43);
const HOUR = 3_600_000;

const weathers: fc.Arbitrary<Weather> = fc.record({
  lost: fc.double({ min: 0, max: 0.4, noNaN: true }),
  lostReply: fc.double({ min: 0, max: 0.3, noNaN: true }),
  duplicated: fc.double({ min: 0, max: 0.3, noNaN: true }),
  serverError: fc.double({ min: 0, max: 0.3, noNaN: true }),
  foreignPage: fc.double({ min: 0, max: 0.2, noNaN: true }),
  killed: fc.double({ min: 0, max: 0.08, noNaN: true }),
  calmFrom: fc.integer({ min: 0, max: 3 * 60_000 }),
});

/** One world: two ended runs and one that is still recording and ends later, under that weather. */
async function simulate(seed: number, weather: Weather) {
  const world = createWorld(seed);
  const server = createServerDouble();
  server.grants.add(GRANT);
  const device: Device = { runs: new Map(), grant: GRANT };
  const traffic: Traffic = { sentBytes: 0, unknownOutcomes: 0, kills: 0, bugs: [] };
  const ended = ['run-a', 'run-b'].map((id) =>
    addRun(device, sampleHeader(id), sampleBlocks(10 + Math.floor(world.random() * 40), world.random), true),
  );
  const journal = sampleBlocks(30, world.random);
  const live = addRun(device, sampleHeader('run-live', true), [], false);
  const runs = [...ended, live];

  const signInAt = world.random() * 60_000;
  server.signedIn = false;
  const wasSafe = new Set<string>();
  let page = openPage(world, server, device, weather, traffic);
  const finished = await world.play(
    () => runs.every((run) => run.progress.derived) || world.now() > HOUR,
    () => {
      if (!page.life.alive) page = openPage(world, server, device, weather, traffic);
      const due = Math.min(journal.length, Math.floor(world.now() / 2_000));
      while (live.blocks.length < due) live.blocks.push(journal[live.blocks.length] as (typeof journal)[number]);
      live.ended = live.blocks.length === journal.length;
      if (!server.signedIn && world.now() >= signInAt) {
        server.signedIn = true;
        page.outbox.retryBlocked();
      }
      for (const run of device.runs.values()) insistOnTruth(run, server.sealed(run.header.runId), wasSafe);
    },
  );
  return { finished, runs, server, traffic };
}

/**
 * 'safe on server' may be said only after the server committed the seal, and is never taken back. Asked after every event,
 * so it throws by itself: the runner's `expect` would take most of the time.
 */
function insistOnTruth({ header, progress }: DeviceRun, sealed: boolean, wasSafe: Set<string>): void {
  const saysSafe = progress.state === 'safe on server';
  if (saysSafe) wasSafe.add(header.runId);
  if (saysSafe && !sealed) throw new Error(`${header.runId} is said to be safe before the server sealed it`);
  if (!saysSafe && wasSafe.has(header.runId)) throw new Error(`${header.runId} was safe and is now ${progress.state}`);
}

describe('outbox under faults', () => {
  // A wall clock that is stepped between any two readings, by up to an hour either way.
  beforeEach(() => {
    vi.spyOn(Date, 'now').mockImplementation(() => 1_780_000_000_000 + Math.round((Math.random() - 0.5) * 2 * HOUR));
  });
  afterEach(() => {
    vi.restoreAllMocks();
  });

  it(`brings every byte to the server once, whatever is lost, repeated or killed (${SEEDS} seeds)`, {
    timeout: 120_000 + SEEDS * 30,
  }, async () => {
    let kills = 0;
    let unknown = 0;
    await fc.assert(
      fc.asyncProperty(fc.integer(), weathers, async (seed, weather) => {
        const { finished, runs, server, traffic } = await simulate(seed, weather);
        expect(traffic.bugs).toEqual([]);
        expect(finished).toBe(true);
        expect(server.counts.runs).toBe(runs.length);
        let journalBytes = 0;
        let chunks = 0;
        for (const run of runs) {
          expect(run.progress).toEqual({ state: 'safe on server', confirmed: run.chunks.length, derived: true, blocked: null });
          expect(server.bytesOf(run.header.runId).equals(bytesOfBlocks(run.blocks))).toBe(true);
          journalBytes += bytesOfBlocks(run.blocks).byteLength;
          chunks += run.chunks.length;
        }
        expect(server.counts.written).toBe(chunks);
        expect(traffic.sentBytes).toBeLessThanOrEqual(journalBytes + traffic.unknownOutcomes * CHUNK_LIMIT);
        kills += traffic.kills;
        unknown += traffic.unknownOutcomes;
      }),
      { numRuns: SEEDS, seed: 20_261_201 },
    );
    // The weather must have been bad for the above to say anything.
    expect(kills).toBeGreaterThan(SEEDS / 4);
    expect(unknown).toBeGreaterThan(SEEDS / 4);
  });
});
