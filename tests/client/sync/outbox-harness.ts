import { createHash } from 'node:crypto';
import { createOutbox, type Outbox } from '#src/sync/outbox.ts';
import { type Device, memoryOutboxStore } from './memory-outbox-store.ts';
import { responseOf, type ServerAnswer, type ServerDouble, type ServerRequest } from './server-double.ts';
import { createWorld, type Life, type SimulatedWorld } from './simulated-world.ts';

/** One page over a network that the test scripts call by call. */
export interface Harness {
  readonly world: SimulatedWorld;
  readonly outbox: Outbox;
  /** Every call that left the client, in order, as `METHOD path`. */
  readonly calls: string[];
  /** Plays until `done`, at most `withinMs` of virtual time; true if it came to pass. */
  until(done: () => boolean, withinMs?: number): Promise<boolean>;
}

/** Answers instead of the server, or null to let the server answer. May throw to break the connection. */
export type Interference = (request: ServerRequest, call: number) => ServerAnswer | null;

export function openHarness(server: ServerDouble, device: Device, interfere: Interference = () => null): Harness {
  const world = createWorld(1);
  const life: Life = { alive: true };
  const calls: string[] = [];
  const outbox = createOutbox({
    store: memoryOutboxStore(device, () => world.pause(life, 1)),
    fetch: async (url, { method, headers, body }) => {
      const request = { method, url, headers, body };
      calls.push(`${method} ${url.split('/').slice(4).join('/')}`.trim());
      await world.pause(life, 10);
      return responseOf(interfere(request, calls.length) ?? server.handle(request));
    },
    sha256: async (bytes) => new Uint8Array(createHash('sha256').update(bytes).digest()),
    delay: (ms) => world.pause(life, ms),
    report: (error) => {
      throw error;
    },
    chunkLimit: 1024,
  });
  void outbox.run();
  return {
    world,
    outbox,
    calls,
    until: async (done, withinMs = 3_600_000) => {
      const end = world.now() + withinMs;
      await world.play(
        () => done() || world.now() > end,
        () => undefined,
      );
      return done();
    },
  };
}
