import { roundedDigits } from '#shared/course/format.ts';

/** One typed value on the grid. `typed` holds what was pressed; nothing pressed yet means that the present value stands. */
export type EntryKind = 'clock' | 'duration' | 'decimal';

export interface EntryField {
  readonly id: string;
  readonly label: string;
  readonly unit: string;
  readonly kind: EntryKind;
  /** The value as it stands, in the same shape as `typed`. */
  readonly present: string;
  readonly typed: string;
}

/** `h` hours, `m` minutes, `s` seconds, `f` thousandths. */
const MASKS: Readonly<Record<Exclude<EntryKind, 'decimal'>, string>> = { clock: 'hh:mm:ss', duration: 'h:mm:ss.fff' };
const DECIMAL = /^\d{0,6}(\.\d{0,3})?$/u;

/** The field after one key (a digit, `.` or `⌫`); a key that does not fit changes nothing. */
export function pressKey(field: EntryField, key: string): EntryField {
  if (key === '⌫') return { ...field, typed: field.typed.slice(0, -1) };
  const typed = field.typed + key;
  if (field.kind === 'decimal') return DECIMAL.test(typed) ? { ...field, typed } : field;
  const places = MASKS[field.kind].replace(/[^a-z]/gu, '').length;
  return /^\d$/u.test(key) && typed.length <= places ? { ...field, typed } : field;
}

/** What stands in the field: typed digits in their mask with `_` for those to come, or the present value. */
export function shownText(field: EntryField): string {
  if (field.typed === '') return field.kind === 'decimal' ? field.present : masked(field.kind, field.present);
  return field.kind === 'decimal' ? field.typed : masked(field.kind, field.typed);
}

function masked(kind: Exclude<EntryKind, 'decimal'>, digits: string): string {
  let next = 0;
  return MASKS[kind].replace(/[a-z]/gu, () => digits[next++] ?? '_');
}

/** The value meant: what was typed, else what stood. */
export const meant = (field: EntryField): string => (field.typed === '' ? field.present : field.typed);

/** Seconds of the day, or null while digits are missing or no clock shows them. */
export function clockSeconds(digits: string): number | null {
  if (!/^\d{6}$/u.test(digits)) return null;
  const [h, m, s] = [Number(digits.slice(0, 2)), Number(digits.slice(2, 4)), Number(digits.slice(4, 6))];
  return h < 24 && m < 60 && s < 60 ? h * 3600 + m * 60 + s : null;
}

/** Milliseconds of `hmmss` with up to three more digits for thousandths; null while digits are missing. */
export function durationMs(digits: string): number | null {
  if (!/^\d{5,8}$/u.test(digits)) return null;
  const [h, m, s] = [Number(digits[0]), Number(digits.slice(1, 3)), Number(digits.slice(3, 5))];
  if (m >= 60 || s >= 60) return null;
  return (h * 3600 + m * 60 + s) * 1000 + Number(digits.slice(5).padEnd(3, '0'));
}

/** The digits that `durationMs` reads back. */
export function durationDigits(ms: number): string {
  const s = Math.floor(ms / 1000);
  const two = (n: number): string => String(n).padStart(2, '0');
  return `${Math.floor(s / 3600) % 10}${two(Math.floor(s / 60) % 60)}${two(s % 60)}${String(ms % 1000).padStart(3, '0')}`;
}

/** A finished decimal above or at zero, as it will be printed; null while there is none. */
export function decimalText(typed: string): string | null {
  return /^\d+(\.\d+)?$/u.test(typed) ? typed.replace(/^0+(?=\d)/u, '') : null;
}

/** A figure as a decimal field shows it, without needless zeros. */
export const decimalDigits = (value: number, decimals: number): string => roundedDigits(value, decimals).replace(/\.?0+$/u, '') || '0';
