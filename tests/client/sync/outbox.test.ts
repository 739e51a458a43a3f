// @vitest-environment node
import { describe, expect, it } from 'vitest';
import { addRun, type Device } from './memory-outbox-store.ts';
import { openHarness } from './outbox-harness.ts';
import { bytesOfBlocks, sampleBlocks, sampleHeader } from './sample-runs.ts';
import { createServerDouble } from './server-double.ts';
import { createWorld } from './simulated-world.ts';

const GRANT = 'g'.repeat(43);
const random = () => createWorld(7).random;

function setUp() {
  const server = createServerDouble();
  server.grants.add(GRANT);
  const device: Device = { runs: new Map(), grant: GRANT };
  return { server, device };
}

const refusal = (status: number, code: string) => ({ status, body: { code, message: 'no', requestId: 'r' } });
const offline = (): never => {
  throw new TypeError('Failed to fetch');
};

describe('outbox', () => {
  it('sends an ended run in order and says safe only when the seal is answered', async () => {
    const { server, device } = setUp();
    const run = addRun(device, sampleHeader('r1'), sampleBlocks(30, random()), true);
    const page = openHarness(server, device);
    expect(await page.until(() => run.progress.derived)).toBe(true);
    const puts = page.calls.filter((call) => call.startsWith('PUT chunks'));
    expect(puts).toEqual(run.chunks.map((chunk) => `PUT chunks/${chunk.n}`));
    expect(puts.length).toBeGreaterThan(3);
    expect(server.bytesOf('r1').equals(bytesOfBlocks(run.blocks))).toBe(true);
  });

  it('keeps a run under way to itself unless the class permits a data link', async () => {
    const { server, device } = setUp();
    const quiet = addRun(device, sampleHeader('quiet', false), sampleBlocks(10, random()), false);
    const linked = addRun(device, sampleHeader('linked', true), sampleBlocks(10, random()), false);
    const page = openHarness(server, device);
    expect(await page.until(() => linked.progress.confirmed > 0)).toBe(true);
    await page.until(() => false, 120_000);
    expect(quiet.progress.confirmed).toBe(0);
    expect(server.sealed('linked')).toBe(false);
    expect(linked.progress.state).toBe('on this device');
    quiet.ended = true;
    expect(await page.until(() => quiet.progress.state === 'safe on server', 30_000)).toBe(true);
  });

  it('says sending only while the server answers', async () => {
    const { server, device } = setUp();
    const run = addRun(device, sampleHeader('r1'), sampleBlocks(30, random()), true);
    const page = openHarness(server, device, offline);
    const seen = new Set<string>();
    await page.until(() => {
      seen.add(run.progress.state);
      return false;
    }, 600_000);
    expect([...seen]).toEqual(['on this device']);
  });

  it('takes back a sending that a killed page left behind', async () => {
    const { server, device } = setUp();
    const run = addRun(device, sampleHeader('r1'), sampleBlocks(30, random()), true);
    run.progress = { ...run.progress, state: 'sending', confirmed: 2 };
    const page = openHarness(server, device, offline);
    expect(await page.until(() => run.progress.state === 'on this device', 100)).toBe(true);
  });

  it('waits longer after each failure but never above five minutes, and goes at once when woken', async () => {
    const { server, device } = setUp();
    const run = addRun(device, sampleHeader('r1'), sampleBlocks(3, random()), true);
    let online = false;
    const page = openHarness(server, device, () => (online ? null : offline()));
    await page.until(() => false, 2 * 3_600_000);
    const before = page.calls.length;
    expect(before).toBeGreaterThan(9 + (2 * 3_600_000) / 310_000 - 3);
    expect(before).toBeLessThan(9 + (2 * 3_600_000) / 300_000 + 1);
    online = true;
    page.outbox.wake();
    expect(await page.until(() => run.progress.state === 'safe on server', 5_000)).toBe(true);
  });

  it('shows a permanent refusal as blocked with the reason, and goes on with the other runs', async () => {
    const { server, device } = setUp();
    const bad = addRun(device, sampleHeader('bad'), sampleBlocks(5, random()), true);
    const good = addRun(device, sampleHeader('good'), sampleBlocks(5, random()), true);
    let refusing = true;
    const page = openHarness(server, device, ({ url }) => (refusing && url.startsWith('/api/runs/bad') ? refusal(403, 'FORBIDDEN') : null));
    expect(await page.until(() => good.progress.derived)).toBe(true);
    expect(bad.progress.state).toBe('blocked');
    expect(bad.progress.blocked?.code).toBe('FORBIDDEN');
    expect(bad.progress.blocked?.message).toMatch(/Sign in as a member/);
    const calls = page.calls.length;
    await page.until(() => false, 600_000);
    expect(page.calls.length).toBe(calls);
    refusing = false;
    page.outbox.retryBlocked('bad');
    expect(await page.until(() => bad.progress.derived, 60_000)).toBe(true);
    expect(bad.progress.blocked).toBeNull();
  });

  it('goes on as whoever is signed in when the grant is no longer taken', async () => {
    const { server, device } = setUp();
    server.grants.clear();
    const run = addRun(device, sampleHeader('r1'), sampleBlocks(5, random()), true);
    const page = openHarness(server, device);
    expect(await page.until(() => run.progress.derived)).toBe(true);
  });

  it('never puts anything behind bytes of another journal', async () => {
    const { server, device } = setUp();
    const other: Device = { runs: new Map(), grant: GRANT };
    const theirs = addRun(other, sampleHeader('r1', true), sampleBlocks(12, createWorld(8).random), false);
    const first = openHarness(server, other);
    expect(await first.until(() => theirs.progress.confirmed > 1)).toBe(true);
    const held = server.bytesOf('r1');
    const mine = addRun(device, sampleHeader('r1', true), sampleBlocks(40, createWorld(9).random), true);
    const second = openHarness(server, device);
    expect(await second.until(() => mine.progress.state === 'blocked')).toBe(true);
    expect(mine.progress.blocked?.code).toBe('DIGEST_MISMATCH');
    expect(server.bytesOf('r1').equals(held)).toBe(true);
  });

  it('keeps a sealed run safe when nobody is signed in to read its result', async () => {
    const { server, device } = setUp();
    server.signedIn = false;
    const run = addRun(device, sampleHeader('r1'), sampleBlocks(5, random()), true);
    const page = openHarness(server, device);
    await page.until(() => false, 600_000);
    expect(run.progress).toMatchObject({ state: 'safe on server', derived: false, blocked: null });
    server.signedIn = true;
    page.outbox.retryBlocked();
    expect(await page.until(() => run.progress.derived, 60_000)).toBe(true);
  });

  it('goes on trying a blocked run that was asked for while the connection is away', async () => {
    const { server, device } = setUp();
    const run = addRun(device, sampleHeader('r1'), sampleBlocks(5, random()), true);
    let weather: 'refused' | 'away' | 'fine' = 'refused';
    const page = openHarness(server, device, () =>
      weather === 'fine' ? null : weather === 'away' ? offline() : refusal(403, 'FORBIDDEN'),
    );
    expect(await page.until(() => run.progress.state === 'blocked')).toBe(true);
    weather = 'away';
    page.outbox.retryBlocked('r1');
    await page.until(() => false, 60_000);
    expect(run.progress.state).toBe('blocked');
    weather = 'fine';
    expect(await page.until(() => run.progress.derived, 120_000)).toBe(true);
  });

  it('stops saying sending when the connection breaks in the middle of a second try', async () => {
    const { server, device } = setUp();
    const run = addRun(device, sampleHeader('r1'), sampleBlocks(30, random()), true);
    run.progress = { ...run.progress, state: 'blocked', blocked: { code: 'FORBIDDEN', message: 'x' } };
    const page = openHarness(server, device, (_request, call) => (call > 4 ? offline() : null));
    expect(await page.until(() => run.progress.confirmed === 2)).toBe(true);
    await page.until(() => false, 500);
    expect(run.progress).toMatchObject({ state: 'on this device', blocked: null });
  });

  it('takes a captive portal for no answer, not for a refusal', async () => {
    const { server, device } = setUp();
    const run = addRun(device, sampleHeader('r1'), sampleBlocks(5, random()), true);
    let portal = true;
    const page = openHarness(server, device, () => (portal ? { status: 403, body: { page: 'pay for Wi-Fi' } } : null));
    await page.until(() => false, 60_000);
    expect(run.progress.state).toBe('on this device');
    portal = false;
    page.outbox.wake();
    expect(await page.until(() => run.progress.derived, 60_000)).toBe(true);
  });

  it('reports a journal with a hole as damaged and sends nothing of it', async () => {
    const { server, device } = setUp();
    const blocks = sampleBlocks(10, random());
    const run = addRun(device, sampleHeader('r1'), [...blocks.slice(0, 4), ...blocks.slice(5)], true);
    const page = openHarness(server, device);
    expect(await page.until(() => run.progress.state === 'blocked')).toBe(true);
    expect(run.progress.blocked?.code).toBe('JOURNAL_DAMAGED');
    expect(server.bytesOf('r1').byteLength).toBe(0);
  });

  it('sends no held byte again over fifty cut connections', async () => {
    const { server, device } = setUp();
    const run = addRun(device, sampleHeader('r1'), sampleBlocks(800, random(), 1000), true);
    let cuts = 0;
    const page = openHarness(server, device, (request, call) => {
      if (call % 7 !== 0 || cuts >= 50) return null;
      cuts += 1;
      if (cuts % 2 === 0) server.handle(request); // the request arrived, the reply did not
      return offline();
    });
    expect(await page.until(() => run.progress.derived, 24 * 3_600_000)).toBe(true);
    expect(cuts).toBe(50);
    expect(server.counts.repeatedBytes).toBe(0);
    expect(server.bytesOf('r1').equals(bytesOfBlocks(run.blocks))).toBe(true);
  });
});
