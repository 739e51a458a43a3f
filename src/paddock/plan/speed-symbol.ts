/**
 * Highest speed a tyre's speed symbol stands for, km/h. Source: UN Regulation No. 30, table of speed category symbols
 * (and No. 54 for the letters below L), figures from memory.
 */
const KMH: Readonly<Record<string, number>> = {
  L: 120,
  M: 130,
  N: 140,
  P: 150,
  Q: 160,
  R: 170,
  S: 180,
  T: 190,
  U: 200,
  H: 210,
  V: 240,
  W: 270,
  Y: 300,
};

export interface SpeedSymbol {
  readonly symbol: string;
  readonly metresPerSecond: number;
}

/** Reads the service description at the end of a tyre's marking, for example `245/40 R18 97W` or `(97Y)`. Null if none. */
export function speedSymbol(tyre: string): SpeedSymbol | null {
  const match = /\b\d{2,3}(?:\/\d{2,3})?\s?([A-Z])\)?(?=$|[\s,;])/.exec(tyre.toUpperCase());
  const symbol = match?.[1];
  const kmh = symbol === undefined ? undefined : KMH[symbol];
  return symbol === undefined || kmh === undefined ? null : { symbol, metresPerSecond: kmh / 3.6 };
}
