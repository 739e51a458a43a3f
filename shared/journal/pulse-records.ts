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

/** Reads pulses one behind the other: nine tenths of a journal, so nothing is made or called for each but the pulse itself. */
export class PulseDecoder {
  private at = 0;
  private boxUs = 0;
  private readonly counts: number[] = [];

  /**
   * Appends pulses from where the reader stands to `out`, until another kind of record, `seq` at `end`, or one that cannot be read:
   * the reader is left at what was not taken.
   */
  readRun(reader: ByteReader, seq: number, end: number, out: unknown[]): void {
    const { bytes } = reader;
    let p = reader.at;
    for (let next = seq; next < end && (bytes[p] as number) >= PULSE_TAG; next++) {
      const channel = (bytes[p] as number) - PULSE_TAG;
      const step = shortNumber(bytes, p + 1);
      const drift = shortNumber(bytes, p + 1 + (step & 3));
      const grown = shortNumber(bytes, p + 1 + (step & 3) + (drift & 3));
      let behind = p + 1 + (step & 3) + (drift & 3) + (grown & 3);
      if (step !== 0 && drift !== 0 && grown !== 0) {
        this.advance(channel, unfolded(step >>> 2), unfolded(drift >>> 2), unfolded(grown >>> 2));
      } else {
        reader.moveTo(p + 1);
        this.advance(channel, reader.signed(), reader.signed(), reader.signed());
        behind = reader.at;
      }
      const { at, boxUs } = this;
      // A checksum holds against accidents, not against a hand-made block: an instant out of range is refused.
      if (behind > reader.end || at < 0 || at >= LATEST_AT) break;
      out.push({ seq: next, at, type: 'pulse.v1', channel, count: this.counts[channel] as number, boxUs });
      p = behind;
    }
    reader.moveTo(p);
  }

  private advance(channel: number, step: number, drift: number, grown: number): void {
    this.at += step;
    this.boxUs = (this.boxUs + drift + step) >>> 0;
    this.counts[channel] = ((this.counts[channel] ?? 0) + grown) >>> 0;
  }
}

const unfolded = (folded: number): number => (folded >>> 1) ^ -(folded & 1);

/** A number of one to three bytes, nearly all of a journal: four times itself, plus how many bytes it takes. 0 for a longer one. */
function shortNumber(bytes: Uint8Array, at: number): number {
  const first = bytes[at] as number;
  if (first < 0x80) return (first << 2) | 1;
  const second = bytes[at + 1] as number;
  if (second < 0x80) return (((first & 0x7f) | (second << 7)) << 2) | 2;
  const third = bytes[at + 2] as number;
  return third < 0x80 ? (((first & 0x7f) | ((second & 0x7f) << 7) | (third << 14)) << 2) | 3 : 0;
}
