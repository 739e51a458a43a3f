import type { NewObservation } from '#shared/journal/observation.ts';
import { createSentenceReader, type SentenceReader, type SentenceReaderOptions } from '#shared/sensor/sentence-reader.ts';

/** Text of a serial line to bytes, one byte a character. */
export const bytesOf = (text: string): Uint8Array => Buffer.from(text, 'latin1');

export type OfType<T extends NewObservation['type']> = Extract<NewObservation, { type: T }>;
export const ofType = <T extends NewObservation['type']>(list: readonly NewObservation[], type: T): OfType<T>[] =>
  list.filter((o): o is OfType<T> => o.type === type);

/** Reads a whole text that arrived at one instant, and then waits long enough for the last fix. */
export function readAll(text: string, options?: SentenceReaderOptions): { observations: NewObservation[]; reader: SentenceReader } {
  const reader = createSentenceReader(options);
  const observations = [...reader.push(bytesOf(text), 1_000_000), ...reader.push(new Uint8Array(), 9_000_000)];
  return { observations, reader };
}
