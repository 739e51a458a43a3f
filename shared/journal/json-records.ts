import type { ByteReader } from './byte-reader.ts';
import type { ByteWriter } from './byte-writer.ts';
import type { Observation, UnknownObservation } from './observation.ts';
import { upcast } from './upcast.ts';
import { utf8Decode, utf8Encode } from './utf8.ts';

/** Every observation that has no binary record of its own, unknown types included: its JSON without seq, which the block knows. */

export const JSON_TAG = 0x01;

export function writeJsonRecord(out: ByteWriter, observation: Observation | UnknownObservation): void {
  const { seq: _known, ...rest } = observation;
  const json = utf8Encode(JSON.stringify(rest));
  out.byte(JSON_TAG);
  out.unsigned(json.length);
  out.append(json);
}

/** The observation behind the tag, in today's shape; null where the bytes are no such record. */
export function readJsonRecord(bytes: Uint8Array, reader: ByteReader, seq: number): Observation | UnknownObservation | null {
  const length = reader.unsigned();
  const from = reader.at;
  reader.skip(length);
  if (reader.short) return null;
  const text = utf8Decode(bytes, from, from + length);
  const value = text === null ? null : parsed(text);
  if (typeof value !== 'object' || value === null) return null;
  const { at, type } = value as { readonly at?: unknown; readonly type?: unknown };
  if (typeof type !== 'string' || !Number.isSafeInteger(at)) return null;
  // fresh from the text, so that it may be numbered in place
  return upcast(Object.assign(value, { seq, at: at as number, type }));
}

function parsed(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return null;
  }
}
