import express from 'express';

/** Largest JSON body: a run's header with its pack, or a course book of 200 places. */
export const JSON_MAX_BYTES = 1024 * 1024;

/** What no honest client sends and PostgreSQL or canonical JSON cannot carry: NUL, half a character, a planted prototype. */
// biome-ignore lint/suspicious/noControlCharactersInRegex: NUL is what it looks for
const UNFIT = /\u0000|\p{Surrogate}/u;

function refuseUnfit(key: string, value: unknown): unknown {
  if (key === '__proto__' || UNFIT.test(key) || (typeof value === 'string' && UNFIT.test(value))) {
    throw new SyntaxError('a text in the body cannot be stored');
  }
  return value;
}

export const readJson = express.json({ limit: JSON_MAX_BYTES, inflate: false, reviver: refuseUnfit });
