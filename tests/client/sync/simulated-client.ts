import { createHash } from 'node:crypto';
import { createOutbox, type Outbox } from '#src/sync/outbox.ts';
import type { UploadFetch } from '#src/sync/upload-client.ts';
import { type Device, memoryOutboxStore } from './memory-outbox-store.ts';
import { responseOf, type ServerDouble } from './server-double.ts';
import type { Life, SimulatedWorld } from './simulated-world.ts';

/** Chances per call. Faults cease at `calmFrom` (virtual ms), so that every world can end. */
export interface Weather {
  readonly lost: number;
  readonly lostReply: number;
  readonly duplicated: number;
  readonly serverError: number;
  readonly foreignPage: number;
  readonly killed: number;
  readonly calmFrom: number;
}

export interface Traffic {
  /** Chunk bytes the client sent, and chunk requests whose outcome the client could not know. */
  sentBytes: number;
  unknownOutcomes: number;
  kills: number;
  bugs: unknown[];
}

export const CHUNK_LIMIT = 1024;

/** One life of the page: the real outbox over the device's storage and the weather's network. */
export function openPage(
  world: SimulatedWorld,
  server: ServerDouble,
  device: Device,
  weather: Weather,
  traffic: Traffic,
): { life: Life; outbox: Outbox } {
  const life: Life = { alive: true };
  const stormy = () => world.now() < weather.calmFrom;
  const step = async (ms: number): Promise<void> => {
    if (stormy() && world.random() < weather.killed) {
      life.alive = false;
      traffic.kills += 1;
    }
    await world.pause(life, ms);
  };
  const outbox = createOutbox({
    store: memoryOutboxStore(device, () => step(1)),
    fetch: networkOf(world, server, weather, traffic, stormy, step),
    sha256: async (bytes) => {
      await step(0);
      return new Uint8Array(createHash('sha256').update(bytes).digest());
    },
    delay: (ms) => world.pause(life, ms),
    report: (error) => traffic.bugs.push(error),
    chunkLimit: CHUNK_LIMIT,
  });
  void outbox.run();
  return { life, outbox };
}

function networkOf(
  world: SimulatedWorld,
  server: ServerDouble,
  weather: Weather,
  traffic: Traffic,
  stormy: () => boolean,
  step: (ms: number) => Promise<void>,
): UploadFetch {
  const happens = (chance: number): boolean => stormy() && world.random() < chance;
  return async (url, { method, headers, body }) => {
    const request = { method, url, headers, body };
    const isChunk = body instanceof Uint8Array;
    if (isChunk) {
      traffic.sentBytes += body.byteLength;
      traffic.unknownOutcomes += 1;
    }
    await step(5 + world.random() * 200);
    if (happens(weather.lost)) throw new TypeError('Failed to fetch');
    if (happens(weather.serverError))
      return responseOf({ status: 503, body: { code: 'BUSY', message: 'busy', requestId: 'r' }, retryAfter: '2' });
    if (happens(weather.foreignPage)) return responseOf({ status: 403, body: undefined });
    const answer = server.handle(request);
    if (happens(weather.duplicated)) server.handle(request);
    await step(5 + world.random() * 200);
    if (happens(weather.lostReply)) throw new TypeError('Failed to fetch');
    if (isChunk) traffic.unknownOutcomes -= 1;
    return responseOf(answer);
  };
}
