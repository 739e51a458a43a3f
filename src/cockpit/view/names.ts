/** Checkpoint names are as long as people make them; these decide how large they can stand. */

/** What the button shows: the place itself, without the edge or side that follows the comma. */
export function shortName(name: string): string {
  const place = name.split(/[,(;:–—]/u)[0]?.trim() ?? '';
  return place === '' ? name.trim() : place;
}

/** Lines a text takes when words are kept whole and a line holds `columns` characters. */
export function linesOf(text: string, columns: number): number {
  let lines = 1;
  let used = 0;
  for (const word of text.split(/\s+/u)) {
    const wanted = used === 0 ? word.length : used + 1 + word.length;
    if (wanted <= columns) {
      used = wanted;
      continue;
    }
    if (used > 0) lines += 1;
    lines += Math.ceil(word.length / columns) - 1;
    used = word.length % columns === 0 ? columns : word.length % columns;
  }
  return lines;
}

/** Advance of JetBrains Mono, em. */
const ADVANCE_EM = 0.6;

/** The largest of the sizes at which the text fits the width in the allowed lines; else the smallest. */
export function fittingSize(text: string, widthPx: number, maxLines: number, sizes: readonly number[]): number {
  const fits = sizes.find((size) => linesOf(text, Math.max(1, Math.floor(widthPx / (size * ADVANCE_EM)))) <= maxLines);
  return fits ?? sizes[sizes.length - 1] ?? 20;
}
