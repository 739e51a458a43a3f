/** Text as it came over a wire: what arrived at once, and when. */
export interface TimedText {
  /** Since the beginning of the stream, ms of the stream's own time. Never runs back. */
  readonly atMs: number;
  readonly text: string;
}

/** Joins what falls due in the same `stepMs`, so that a paced stream needs few messages. */
export function inSteps(stream: readonly TimedText[], stepMs: number): TimedText[] {
  const steps: { atMs: number; texts: string[] }[] = [];
  for (const { atMs, text } of stream) {
    const last = steps.at(-1);
    if (last !== undefined && Math.floor(atMs / stepMs) === Math.floor(last.atMs / stepMs)) {
      last.atMs = atMs;
      last.texts.push(text);
    } else steps.push({ atMs, texts: [text] });
  }
  return steps.map(({ atMs, texts }) => ({ atMs, text: texts.join('') }));
}
