/** Path and both values of the first place where two plain values differ; null for none. 0 and -0 are the same. */
export function firstDifference(a: unknown, b: unknown, path = ''): string | null {
  if (a === b) return null;
  const nested = typeof a === 'object' && typeof b === 'object' && a !== null && b !== null;
  if (!nested) return Number.isNaN(a) && Number.isNaN(b) ? null : `${path}: ${JSON.stringify(a)} and ${JSON.stringify(b)}`;
  for (const key of new Set([...Object.keys(a), ...Object.keys(b)])) {
    const found = firstDifference((a as Record<string, unknown>)[key], (b as Record<string, unknown>)[key], `${path}.${key}`);
    if (found !== null) return found;
  }
  return null;
}
