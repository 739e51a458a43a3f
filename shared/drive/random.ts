/** Seeded random numbers: the same seed and name give the same numbers on every machine. */
export interface Random {
  /** Evenly spread, 0 (within) to 1 (without). */
  unit(): number;
  range(low: number, high: number): number;
  /** Normal with mean 0 and standard deviation `sigma`. */
  gauss(sigma: number): number;
}

/** FNV-1a, 32 bits. Source: Fowler, Noll, Vo, RFC 9923. */
function hash(text: string): number {
  let h = 0x811c9dc5;
  for (let i = 0; i < text.length; i += 1) h = Math.imul(h ^ text.charCodeAt(i), 0x01000193);
  return h >>> 0;
}

/**
 * A stream of its own for each `name`, so that asking one part of the model for more numbers shifts no other part.
 * Generator: mulberry32 (Tommy Ettinger, public domain; from memory). Normal numbers by Box and Muller (1958).
 */
export function createRandom(seed: number, name: string): Random {
  let state = hash(`${seed}/${name}`);
  const unit = (): number => {
    state = (state + 0x6d2b79f5) | 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 2 ** 32;
  };
  return {
    unit,
    range: (low, high) => low + (high - low) * unit(),
    gauss: (sigma) => sigma * Math.sqrt(-2 * Math.log(1 - unit())) * Math.cos(2 * Math.PI * unit()),
  };
}

/** Noise that wanders back to 0: standard deviation `sigma`, correlated over `span` (the unit of `step`'s argument). */
export function createWander(random: Random, sigma: number, span: number): (step: number) => number {
  let value = random.gauss(sigma);
  return (step) => {
    const keep = Math.exp(-step / span);
    value = value * keep + random.gauss(sigma * Math.sqrt(1 - keep * keep));
    return value;
  };
}
