/**
 * One text for one value, so that equal values have equal digests. Keys sorted by UTF-16 code units, no whitespace, numbers and
 * strings as ECMAScript writes them. Source: RFC 8785 (JSON Canonicalization Scheme), sections 3.2.2 and 3.2.3.
 */

/**
 * @param value Plain JSON: null, booleans, finite numbers, well-formed strings, arrays, plain objects. Properties whose value is
 *   `undefined` are left out, as `JSON.stringify` leaves them out.
 * @throws TypeError for anything JSON cannot carry (NaN, infinities, bigint, functions, undefined in an array, lone surrogates).
 */
export function canonicalJson(value: unknown): string {
  if (value === null || typeof value === 'boolean') return String(value);
  if (typeof value === 'number') return canonicalNumber(value);
  if (typeof value === 'string') return canonicalString(value);
  if (Array.isArray(value)) return `[${value.map(canonicalJson).join(',')}]`;
  if (typeof value === 'object') return canonicalObject(value as Readonly<Record<string, unknown>>);
  throw new TypeError(`canonical JSON cannot carry a value of type ${typeof value}`);
}

function canonicalNumber(value: number): string {
  if (!Number.isFinite(value)) throw new TypeError(`canonical JSON cannot carry the number ${value}`);
  return JSON.stringify(value);
}

function canonicalString(value: string): string {
  // JSON.stringify would escape a lone surrogate; RFC 8785 3.2.2.2 asks for an error instead.
  if (LONE_SURROGATE.test(value)) throw new TypeError('canonical JSON cannot carry a string with a lone surrogate');
  return JSON.stringify(value);
}

const LONE_SURROGATE = /\p{Surrogate}/u;

function canonicalObject(value: Readonly<Record<string, unknown>>): string {
  const members: string[] = [];
  // The default sort compares UTF-16 code units, which is the order RFC 8785 3.2.3 asks for.
  for (const key of Object.keys(value).sort()) {
    const member = value[key];
    if (member !== undefined) members.push(`${canonicalString(key)}:${canonicalJson(member)}`);
  }
  return `{${members.join(',')}}`;
}
