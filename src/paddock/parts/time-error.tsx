import { formatTimeError } from '#shared/course/format.ts';

const LONGEST_WORD = 'early'.length;

/** `3.41 late `: magnitude and word, the word padded so that decimal points align in a column of a tabular face. */
export function timeErrorText(seconds: number, decimals: number): string {
  const { magnitude, word } = formatTimeError(seconds, decimals);
  return `${magnitude} ${word.padEnd(LONGEST_WORD)}`;
}

/** A time error in running text or large, the word in normal weight. */
export function TimeError({
  seconds,
  decimals,
  className = '',
}: {
  readonly seconds: number;
  readonly decimals: number;
  readonly className?: string;
}) {
  const { magnitude, word } = formatTimeError(seconds, decimals);
  return (
    <span className={`figure ${className}`}>
      {magnitude} <span className="font-normal">{word}</span>
    </span>
  );
}
