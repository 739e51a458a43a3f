/** One clock exchange with the server; null where there is no connection or the answer is not one. */
export async function exchangeTime(): Promise<{ readonly t2: number; readonly t3: number } | null> {
  try {
    const answer = await fetch('/api/time', { cache: 'no-store', credentials: 'same-origin' });
    const body: unknown = answer.ok ? await answer.json() : null;
    return isStamps(body) ? body : null;
  } catch {
    return null;
  }
}

function isStamps(body: unknown): body is { readonly t2: number; readonly t3: number } {
  return (
    typeof body === 'object' && body !== null && 't2' in body && 't3' in body && typeof body.t2 === 'number' && typeof body.t3 === 'number'
  );
}
