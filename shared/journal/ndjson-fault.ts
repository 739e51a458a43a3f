import type { Observation, UnknownObservation } from './observation.ts';
import type { RunHeader } from './run-header.ts';

export type NdjsonFaultCode =
  | 'empty'
  | 'not-json'
  | 'wrong-format'
  | 'newer-version'
  | 'wrong-header'
  | 'not-an-observation'
  | 'wrong-field'
  | 'sequence-gap';

export interface NdjsonFault {
  readonly code: NdjsonFaultCode;
  /** Counted from 1. */
  readonly line: number;
  readonly message: string;
  /** What was read before the fault. */
  readonly header: RunHeader | null;
  readonly observations: readonly (Observation | UnknownObservation)[];
}

const ADVICE: Readonly<Record<NdjsonFaultCode, string>> = {
  empty: 'Choose a file exported from Evenline.',
  'not-json': 'If it is the last line, the file was cut off: export it again, or delete the line to use what is before it.',
  'wrong-format': 'Choose a journal exported from Evenline; its first line is the header.',
  'newer-version': 'Update Evenline and read the file again.',
  'wrong-header': 'Export the journal again; the header carries the pack and cannot be mended by hand.',
  'not-an-observation': 'Every line behind the header is one observation. Export the journal again.',
  'wrong-field': 'Mend the field, or export the journal again.',
  'sequence-gap': 'A line is missing, repeated or out of order. Export the journal again.',
};

export function ndjsonFault(code: NdjsonFaultCode, line: number, detail: string): NdjsonFault {
  return { code, line, message: `Line ${line}: ${detail}. ${ADVICE[code]}`, header: null, observations: [] };
}
