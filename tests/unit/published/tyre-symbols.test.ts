import { describe, expect, it } from 'vitest';
import { checkTyre, SYMBOL_KMH, tyreSymbol } from '#shared/course/tyre-symbol.ts';

const kmhOf = (marking: string): number | null => {
  const found = tyreSymbol(marking);
  return found === null ? null : Math.round(found.speed * 3.6 * 1e6) / 1e6;
};

describe('tyre speed symbols', () => {
  // UN Regulation No. 30, speed category symbols of passenger car tyres; from memory.
  it.each([
    ['L', 120],
    ['M', 130],
    ['N', 140],
    ['P', 150],
    ['Q', 160],
    ['R', 170],
    ['S', 180],
    ['T', 190],
    ['U', 200],
    ['H', 210],
    ['V', 240],
    ['W', 270],
    ['Y', 300],
  ])('No. 30: %s is %d km/h', (letter, kmh) => {
    expect(kmhOf(`225/45 R17 91${letter}`)).toBe(kmh);
  });

  // UN Regulation No. 54, the same for commercial vehicles, with two load indices; from memory.
  it.each([
    ['F', 80],
    ['G', 90],
    ['J', 100],
    ['K', 110],
    ['L', 120],
    ['M', 130],
    ['N', 140],
    ['P', 150],
    ['Q', 160],
    ['R', 170],
    ['S', 180],
    ['T', 190],
    ['U', 200],
    ['H', 210],
  ])('No. 54: %s is %d km/h', (letter, kmh) => {
    expect(kmhOf(`195/70 R15C 104/102${letter}`)).toBe(kmh);
  });

  it('the alphabet mostly, H after U; no I, O or X', () => {
    const order = [...'FGJKLMNPQRSTUHVWY'].map((letter) => SYMBOL_KMH[letter] as number);
    expect(order).toEqual([...order].sort((a, b) => a - b));
    expect(Object.keys(SYMBOL_KMH)).toHaveLength(order.length);
    for (const letter of 'IOX') expect(tyreSymbol(`225/45 R17 91${letter}`)).toBeNull();
  });

  // UN Regulation No. 30: ZR alone is above 240 km/h, with W or Y the symbol counts, in brackets the maker may say more; from memory.
  it.each([
    ['245/40 ZR18', 'ZR', 240, true],
    ['245/40 ZR18 97W', 'W', 270, false],
    ['245/40ZR18 (97Y)', '(Y)', 300, true],
    ['245/40 zr 18 97y', 'Y', 300, false],
    ['265/35 R18 XL 97 V, dry set', 'V', 240, false],
    ['205/55R16 91V XL', 'V', 240, false],
  ])('%s: %s', (marking, symbol, kmh, more) => {
    const found = tyreSymbol(marking);
    expect(found).toMatchObject({ symbol, makerMaySayMore: more });
    expect(kmhOf(marking)).toBe(kmh);
  });

  it.each(['', '265/35 R18', 'slicks', '97', 'R17', '225/45 R17 91W91'])('%j says nothing', (marking) => {
    expect(tyreSymbol(marking)).toBeNull();
  });
});

describe('the cap against the tyre', () => {
  const kmh = (text: string) => ({ text, unit: 'km/h' as const });
  const mph = (text: string) => ({ text, unit: 'mph' as const });
  it.each([
    ['225/45 R17 91V', kmh('240'), 'ok', false],
    ['225/45 R17 91V', kmh('240.01'), 'above symbol', true],
    ['225/45 R17 91W', kmh('270'), 'ok', false],
    // 149 mph is 239.8 km/h, 150 mph is 241.4
    ['225/45 R17 91V', mph('149'), 'ok', false],
    ['225/45 R17 91V', mph('150'), 'above symbol', true],
    ['225/45 ZR17', kmh('250'), 'ask the maker', true],
    ['225/45 ZR17', kmh('240'), 'ok', false],
    ['225/45 ZR17 (91Y)', kmh('310'), 'ask the maker', true],
    ['225/45 R17', kmh('100'), 'no symbol', false],
    ['225/45 R17 91V', null, 'no cap', false],
  ])('%s, cap %o: %s', (tyre, cap, code, stop) => {
    expect(checkTyre(tyre, cap, 'Dry', 'km/h')).toMatchObject({ code, stop });
  });

  it('says what to do', () => {
    expect(checkTyre('225/45 R17 91V', kmh('250'), 'Dry', 'km/h').message).toBe(
      "Stop: the cap of 250 km/h is above the tyres' speed symbol V (240 km/h). Fit other tyres or choose another class.",
    );
    expect(checkTyre('225/45 ZR17', mph('155'), 'Dry', 'mph').message).toBe(
      "Stop: the cap of 155 mph is above the 149 mph that the tyres' marking ZR vouches for. Get the maker's figure in writing, or fit other tyres.",
    );
  });
});
