import { printedSpeed } from '#shared/course/convert.ts';
import type { PrintedSpeed } from '#shared/course/course-book.ts';
import { formatSpeed } from '#shared/course/format.ts';
import { type MetresPerSecond, metresPerSecond, type SpeedUnit } from '#shared/units.ts';

/** What a tyre's marking says of its highest speed, held against a class's cap. */

/**
 * Speed symbols, km/h. UN Regulation No. 30 (passenger cars): L to Y. UN Regulation No. 54 (commercial vehicles): F to N and P to
 * T, U and H, with the same speeds where both have a letter. All from memory.
 */
export const SYMBOL_KMH: Readonly<Record<string, number>> = {
  F: 80,
  G: 90,
  J: 100,
  K: 110,
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
/** `ZR` in the size stands for more than this, km/h, without saying how much. UN Regulation No. 30, from memory. */
const ZR_KMH = 240;

export interface TyreSymbol {
  /** As marked: a letter, a letter in brackets, or ZR. */
  readonly symbol: string;
  readonly speed: MetresPerSecond;
  /** Faster may be allowed, by the maker's own word: `(97Y)`, and ZR with no symbol of its own. */
  readonly makerMaySayMore: boolean;
}

const DESCRIPTION = /(\()?\b\d{2,3}(?:\/\d{2,3})?\s?([A-Z])(\))?(?=$|[\s,;])/g;

/** Reads a tyre's marking: the service description after its size (`245/40 R18 97W`, `(97Y)`), else ZR in the size. Null for neither. */
export function tyreSymbol(marking: string): TyreSymbol | null {
  const text = marking.toUpperCase();
  for (const match of text.matchAll(DESCRIPTION)) {
    const [, open, letter = '', close] = match;
    const kmh = SYMBOL_KMH[letter];
    if (kmh === undefined) continue;
    const bracketed = open !== undefined && close !== undefined;
    return { symbol: bracketed ? `(${letter})` : letter, speed: kmhSpeed(kmh), makerMaySayMore: bracketed };
  }
  return /\d\s?ZR\s?\d/.test(text) ? { symbol: 'ZR', speed: kmhSpeed(ZR_KMH), makerMaySayMore: true } : null;
}

const kmhSpeed = (kmh: number): MetresPerSecond => metresPerSecond(kmh / 3.6);

export interface TyreVerdict {
  /**
   * ok: the symbol is not below the cap. above symbol: a stop sign. ask the maker: the cap is above what the marking alone
   * allows, a stop sign until the tyre's maker says otherwise in writing. no cap, no symbol: nothing to compare; read on.
   */
  readonly code: 'ok' | 'above symbol' | 'ask the maker' | 'no cap' | 'no symbol';
  /** True where the car must not start on these tyres as things stand. */
  readonly stop: boolean;
  readonly symbol: TyreSymbol | null;
  /** Tells the person what to do. */
  readonly message: string;
}

/** Float dust of turning km/h and mph into m/s. */
const DUST = 1e-9;

/**
 * Holds the class's cap, not the planned peak, against the tyre: the class allows that speed and somebody will drive it.
 * `tyre`: the marking as noted, `setup`: the wheel set-up's name for the sentence, `unit`: how to print the symbol's speed.
 */
export function checkTyre(tyre: string, cap: PrintedSpeed | null, setup: string, unit: SpeedUnit): TyreVerdict {
  const symbol = tyreSymbol(tyre);
  const verdict = (code: TyreVerdict['code'], message: string): TyreVerdict => {
    return { code, stop: code === 'above symbol' || code === 'ask the maker', symbol, message };
  };
  if (symbol === null) {
    return verdict(
      'no symbol',
      `No speed symbol is noted for the tyres of set-up ${setup}. Read it off the tyre and compare it with the cap.`,
    );
  }
  const rated = `${symbol.symbol} (${formatSpeed(symbol.speed, unit)} ${unit})`;
  if (cap === null) return verdict('no cap', `Tyres of set-up ${setup}: speed symbol ${rated}.`);
  if (printedSpeed(cap) <= symbol.speed + DUST) return verdict('ok', `Tyres of set-up ${setup}: speed symbol ${rated}, not below the cap.`);
  const above = `Stop: the cap of ${cap.text} ${cap.unit} is above`;
  if (symbol.makerMaySayMore) {
    return verdict(
      'ask the maker',
      `${above} the ${formatSpeed(symbol.speed, unit)} ${unit} that the tyres' marking ${symbol.symbol} vouches for. Get the maker's figure in writing, or fit other tyres.`,
    );
  }
  return verdict('above symbol', `${above} the tyres' speed symbol ${rated}. Fit other tyres or choose another class.`);
}
