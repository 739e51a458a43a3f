import { fail, ok, type Result } from '#shared/result.ts';
import { type NdjsonFault, ndjsonFault } from './ndjson-fault.ts';
import type { RunHeader } from './run-header.ts';

export const JOURNAL_VERSION = 1;

type Kind = 'text' | 'number' | 'truth' | 'object';
const FIELDS: Readonly<Record<Exclude<keyof RunHeader, 'format' | 'version'>, Kind>> = {
  runId: 'text',
  deviceId: 'text',
  entryId: 'text',
  attemptId: 'text',
  packDigest: 'text',
  pack: 'object',
  clockRate: 'number',
  practice: 'truth',
  createdMs: 'number',
  appVersion: 'text',
};

/** The header from line 1. The pack itself is judged by its digest, which this folder cannot compute: the caller does. */
export function judgeHeader(line: string): Result<RunHeader, NdjsonFault> {
  if (line.trim() === '') return fail(ndjsonFault('empty', 1, 'there is no header'));
  let value: unknown;
  try {
    value = JSON.parse(line);
  } catch {
    return fail(ndjsonFault('not-json', 1, 'this is not JSON'));
  }
  const header = typeof value === 'object' && value !== null ? (value as Readonly<Record<string, unknown>>) : {};
  if (header['format'] !== 'evenline-journal') return fail(ndjsonFault('wrong-format', 1, 'the format is not "evenline-journal"'));
  const version = header['version'];
  if (typeof version === 'number' && version > JOURNAL_VERSION) return fail(ndjsonFault('newer-version', 1, `journal version ${version}`));
  if (version !== JOURNAL_VERSION) return fail(ndjsonFault('wrong-format', 1, `journal version ${String(version)} was never published`));
  const wrong = Object.entries(FIELDS).find(([name, kind]) => !isOf(kind, header[name]));
  if (wrong !== undefined) return fail(ndjsonFault('wrong-header', 1, `"${wrong[0]}" is missing or of the wrong kind`));
  return ok(value as RunHeader);
}

function isOf(kind: Kind, value: unknown): boolean {
  if (kind === 'text') return typeof value === 'string';
  if (kind === 'number') return Number.isFinite(value);
  return kind === 'truth' ? typeof value === 'boolean' : typeof value === 'object' && value !== null;
}
