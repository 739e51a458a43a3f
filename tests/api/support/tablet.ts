import { randomBytes } from 'node:crypto';
import { v7 as uuidv7 } from 'uuid';
import { chainDigest } from '#server/services/runs/chain.ts';
import { type PracticeEventResponse, practiceEventResponseSchema } from '#shared/api/events.ts';
import { ZERO_DIGEST } from '#shared/api/fields.ts';
import { type PackResponse, packResponseSchema } from '#shared/api/pack.ts';
import { encodeBlock } from '#shared/journal/block.ts';
import type { Observation } from '#shared/journal/observation.ts';
import type { RunHeader } from '#shared/journal/run-header.ts';
import type { Caller } from './caller.ts';
import type { Person } from './people.ts';

/** What a tablet does with the server, by hand, so that tests may do it wrong. */

export interface Loaded extends PracticeEventResponse, PackResponse {}

/** A practice event for the person's team, its pack loaded. */
export async function loadPractice(person: Person): Promise<Loaded> {
  const event = await person.post(`/api/teams/${person.teamId}/practice-event`).expect(201);
  const ids = practiceEventResponseSchema.parse(event.body);
  const pack = await person.post(`/api/attempts/${ids.attemptId}/pack`).expect(200);
  return { ...ids, ...packResponseSchema.parse(pack.body) };
}

export function headerFor(loaded: Loaded, changes: Partial<RunHeader> = {}): RunHeader {
  return {
    format: 'evenline-journal',
    version: 1,
    runId: uuidv7(),
    deviceId: `tablet-${randomBytes(4).toString('hex')}`,
    entryId: loaded.entryId,
    attemptId: loaded.attemptId,
    packDigest: loaded.digest,
    pack: loaded.pack,
    clockRate: 1,
    practice: false,
    createdMs: Date.now(),
    appVersion: '0.0.0-test',
    ...changes,
  };
}

export interface SentChunk {
  readonly n: number;
  readonly bytes: Uint8Array;
  readonly digest: string;
}

/** Chains bytes that were cut already. */
export function chained(pieces: readonly Uint8Array[]): readonly SentChunk[] {
  let head = ZERO_DIGEST;
  return pieces.map((bytes, n) => {
    head = chainDigest(head, bytes);
    return { n, bytes, digest: head };
  });
}

/** A short journal of pulses, a note in each chunk: `count` chunks of two blocks. */
export function shortJournal(count: number): readonly SentChunk[] {
  let seq = 0;
  const next = (rest: object): Observation => ({ ...rest, seq: seq++, at: seq * 10_000 }) as Observation;
  return chained(
    Array.from({ length: count }, (_, n) => {
      const pulses = Array.from({ length: 20 }, () => next({ type: 'pulse.v1', channel: 1, count: 40 * seq, boxUs: 10_000 * seq }));
      const first = encodeBlock(pulses[0]?.seq ?? 0, pulses);
      const note = next({ type: 'note.v1', text: `chunk ${n}` });
      return Buffer.concat([first, encodeBlock(note.seq, [note])]);
    }),
  );
}

export async function sendAll(caller: Caller, header: RunHeader, chunks: readonly SentChunk[]): Promise<void> {
  await caller.put(`/api/runs/${header.runId}`, header).expect(201);
  for (const { n, bytes, digest } of chunks) await caller.chunk(header.runId, n, bytes, digest).expect(201);
}

export const sealOf = (chunks: readonly SentChunk[]) => ({ count: chunks.length, head: chunks.at(-1)?.digest ?? ZERO_DIGEST });
