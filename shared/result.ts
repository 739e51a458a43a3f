/** Expected failures as values. Exceptions mean bugs. */
export type Result<T, E> = { readonly ok: true; readonly value: T } | { readonly ok: false; readonly error: E };

export const ok = <T>(value: T): { ok: true; value: T } => ({ ok: true, value });
export const fail = <E>(error: E): { ok: false; error: E } => ({ ok: false, error });

/** Marks a switch over a union as complete; reached only by a bug. */
export function never(value: never): never {
  throw new Error(`unhandled case: ${JSON.stringify(value)}`);
}
