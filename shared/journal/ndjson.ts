import { fail, ok, type Result } from '#shared/result.ts';
import { type NdjsonFault, type NdjsonFaultCode, ndjsonFault } from './ndjson-fault.ts';
import { judgeHeader } from './ndjson-header.ts';
import type { Observation, UnknownObservation } from './observation.ts';
import type { RunHeader } from './run-header.ts';
import { MALFORMED, upcast } from './upcast.ts';

/** A journal as text for people and other programs: line 1 the header with the pack, then one observation a line. See FORMAT.md. */

/** @param observations All of the run, seq 0 first, without a gap. */
export function toNdjson(header: RunHeader, observations: Iterable<Observation | UnknownObservation>): string {
  const lines = [JSON.stringify(header)];
  for (const { seq, at, type, ...rest } of observations) lines.push(JSON.stringify({ seq, at, type, ...rest }));
  return `${lines.join('\n')}\n`;
}

export interface JournalText {
  readonly header: RunHeader;
  readonly observations: readonly (Observation | UnknownObservation)[];
}

/**
 * Reads what `toNdjson` wrote, old versions and unknown types included. A fault names the line and what to do, and carries
 * whatever was read before it, so that nothing is lost on bad input. Blank lines and CR line ends pass.
 */
export function fromNdjson(text: string): Result<JournalText, NdjsonFault> {
  const lines = text.split('\n');
  const header = judgeHeader((lines[0] ?? '').replace(/^\uFEFF/, ''));
  if (!header.ok) return header;
  const observations: (Observation | UnknownObservation)[] = [];
  for (let i = 1; i < lines.length; i++) {
    const line = lines[i] as string;
    if (line.trim() === '') continue;
    const read = readLine(line, observations.length);
    if (!read.ok) {
      const { code, detail } = read.error;
      return fail({ ...ndjsonFault(code, i + 1, detail), header: header.value, observations });
    }
    observations.push(read.value);
  }
  return ok({ header: header.value, observations });
}

interface LineFault {
  readonly code: NdjsonFaultCode;
  readonly detail: string;
}

function readLine(line: string, expected: number): Result<Observation | UnknownObservation, LineFault> {
  let value: unknown;
  try {
    value = JSON.parse(line);
  } catch {
    return fail({ code: 'not-json', detail: 'this is not JSON' });
  }
  if (typeof value !== 'object' || value === null) return fail({ code: 'not-an-observation', detail: 'this is JSON, but no object' });
  const { seq, at, type } = value as { readonly seq?: unknown; readonly at?: unknown; readonly type?: unknown };
  if (typeof type !== 'string' || !Number.isSafeInteger(at) || !Number.isSafeInteger(seq)) {
    return fail({ code: 'not-an-observation', detail: 'seq and at must be whole numbers and type a text' });
  }
  if (seq !== expected) return fail({ code: 'sequence-gap', detail: `observation ${String(seq)} where ${expected} follows` });
  const observation = upcast({ ...value, seq: expected, at: at as number, type });
  if (observation.type === MALFORMED && type !== MALFORMED) {
    return fail({
      code: 'wrong-field',
      detail: `"${String((observation as UnknownObservation)['field'])}" of ${type} is missing or of the wrong kind`,
    });
  }
  return ok(observation);
}
