import { MessageChannel } from 'node:worker_threads';
import { afterEach, describe, expect, it } from 'vitest';
import { type CallPort, connectStore, serveStore } from '#src/storage/store-calls.ts';
import { blocksOfRun, Device, headerOf, must } from './device.ts';

let close: () => void = () => undefined;
afterEach(() => close());

function ports(): { readonly here: CallPort; readonly there: CallPort } {
  const { port1, port2 } = new MessageChannel();
  close = () => port1.close();
  return { here: port1 as unknown as CallPort, there: port2 as unknown as CallPort };
}

describe('the store over a port', () => {
  it('offers every call of the store on the other side', async () => {
    const { here, there } = ports();
    const { store } = await new Device().window();
    serveStore(Promise.resolve(store), there);
    const client = connectStore(here).store;
    expect(Object.keys(client).sort()).toEqual(Object.keys(store).sort());
    must(await client.createRun(headerOf('run-1')));
    for (const block of blocksOfRun(11)) must(await client.append('run-1', block));
    const run = must(await client.readRun('run-1'));
    expect(run.blocks.map((block) => [...block.bytes])).toEqual(blocksOfRun(11).map((block) => [...block.bytes]));
    expect(await client.append('run-2', blocksOfRun(1)[0] as never)).toMatchObject({ ok: false, error: { code: 'unknown-run' } });
  });

  it('answers calls in flight, and later ones, when the other side dies', async () => {
    const { here } = ports();
    const { store, fail } = connectStore(here);
    const inFlight = [store.append('run-1', blocksOfRun(1)[0] as never), store.listRuns()];
    const settled = Promise.allSettled(inFlight);
    fail('the journal worker could not be loaded');
    expect(await settled).toMatchObject([
      { status: 'fulfilled', value: { ok: false, error: { code: 'unavailable', message: expect.stringMatching(/could not be loaded/) } } },
      { status: 'rejected', reason: { message: 'the journal worker could not be loaded' } },
    ]);
    expect(await store.readRun('run-1')).toMatchObject({ ok: false, error: { code: 'unavailable' } });
  });

  it('carries a failure to open over as a rejection, not as silence', async () => {
    const { here, there } = ports();
    serveStore(Promise.reject(new Error('no storage here')), there);
    const { store } = connectStore(here);
    await expect(store.listRuns()).rejects.toThrow('no storage here');
    expect(await store.createRun(headerOf('run-1'))).toMatchObject({ ok: false, error: { code: 'unavailable' } });
  });
});
