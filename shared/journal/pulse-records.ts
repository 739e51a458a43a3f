import type { ByteReader } from './byte-reader.ts';
import type { ByteWriter } from './byte-writer.ts';
import type { PulseV1 } from './observation.ts';

/**
 * `pulse.v1` in some seven bytes: the channel in the tag, then what changed since the last pulse of the block. The box's clock
 * and the session clock run alike, so the box's step is kept as its difference from the session's.
 */

/** Tags from here on are pulses, the channel added. */
export const PULSE_TAG = 0x80;
const CHANNELS = 0x80;
const U32 = 2 ** 32;
/** Keeps every difference below what `ByteWriter.signed` can carry. */
const LATEST_AT = 2 ** 50;

interface Last {
  at: number;
  boxUs: number;
  readonly counts: number[];
}
const nothingYet = (): Last => ({ at: 0, boxUs: 0, counts: [] });

/** `write` answers false for anything that is not exactly a `pulse.v1` in range: that goes down as JSON. */
export function createPulseEncoder(out: ByteWriter): { write(observation: { readonly type: string }): boolean } {
  const last = nothingYet();
  return {
    write(observation) {
      if (!isPlainPulse(observation)) return false;
      const { at, boxUs, channel, count } = observation;
      const step = at - last.at;
      out.byte(PULSE_TAG | channel);
      out.signed(step);
      out.signed(((boxUs - last.boxUs) | 0) - step);
      out.signed((count - (last.counts[channel] ?? 0)) | 0);
      last.at = at;
      last.boxUs = boxUs;
      last.counts[channel] = count;
      return true;
    },
  };
}

const FIELDS = 6;

function isPlainPulse(o: { readonly type: string }): o is PulseV1 {
  if (o.type !== 'pulse.v1' || Object.keys(o).length !== FIELDS) return false;
  const { at, boxUs, channel, count } = o as PulseV1;
  return within(at, LATEST_AT) && within(boxUs, U32) && within(count, U32) && within(channel, CHANNELS);
}

/** Not minus zero either, which the record could not give back. */
const within = (value: number, below: number): boolean => Number.isInteger(value) && value >= 0 && value < below && !Object.is(value, -0);

export function createPulseDecoder(reader: ByteReader): { read(tag: number, seq: number): PulseV1 | null } {
  const last = nothingYet();
  return {
    read(tag, seq) {
      const channel = tag - PULSE_TAG;
      const step = reader.signed();
      last.at += step;
      last.boxUs = (last.boxUs + reader.signed() + step) >>> 0;
      const count = ((last.counts[channel] ?? 0) + reader.signed()) >>> 0;
      last.counts[channel] = count;
      // A checksum holds against accidents, not against a hand-made block: an instant out of range is refused.
      if (last.at < 0 || last.at >= LATEST_AT) return null;
      return { seq, at: last.at, type: 'pulse.v1', channel, count, boxUs: last.boxUs };
    },
  };
}
