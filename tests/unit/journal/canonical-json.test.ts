import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { canonicalJson } from '#shared/canonical-json.ts';

/** Examples of RFC 8785, written down from memory. */
describe('canonical JSON, against the examples of RFC 8785', () => {
  it('writes the sample object of section 3.2.2', () => {
    const sample: unknown = JSON.parse(String.raw`{
      "numbers": [333333333.33333329, 1E30, 4.50, 2e-3, 0.000000000000000000000000001],
      "string": "\u20ac$\u000F\u000aA'\u0042\u0022\u005c\\\"\/",
      "literals": [null, true, false]
    }`);
    expect(canonicalJson(sample)).toBe(
      String.raw`{"literals":[null,true,false],"numbers":[333333333.3333333,1e+30,4.5,0.002,1e-27],"string":"€$\u000f\nA'B\"\\\\\"/"}`,
    );
  });

  it('sorts the keys of section 3.2.3 by UTF-16 code units', () => {
    const keys = { '€': 1, '\r': 2, '\ufb33': 3, '1': 4, '😀': 5, '\u0080': 6, ö: 7 };
    expect(Object.keys(JSON.parse(canonicalJson(keys).replace('"1"', '"one"')))).toEqual(['\r', 'one', '\u0080', 'ö', '€', '😀', '\ufb33']);
  });

  it.each([
    ['0000000000000000', '0'],
    ['8000000000000000', '0'],
    ['0000000000000001', '5e-324'],
    ['8000000000000001', '-5e-324'],
    ['7fefffffffffffff', '1.7976931348623157e+308'],
    ['4340000000000000', '9007199254740992'],
    ['4430000000000000', '295147905179352830000'],
    ['44b52d02c7e14af5', '9.999999999999997e+22'],
    ['44b52d02c7e14af6', '1e+23'],
    ['444b1ae4d6e2ef4e', '999999999999999700000'],
    ['444b1ae4d6e2ef50', '1e+21'],
    ['3eb0c6f7a0b5ed8c', '9.999999999999997e-7'],
    ['3eb0c6f7a0b5ed8d', '0.000001'],
    ['41b3de4355555555', '333333333.3333333'],
    ['becbf647612f3696', '-0.0000033333333333333333'],
    ['43143ff3c1cb0959', '1424953923781206.2'],
  ])('writes the number %s of appendix B as %s', (bits, text) => {
    const view = new DataView(new ArrayBuffer(8));
    view.setBigUint64(0, BigInt(`0x${bits}`));
    expect(canonicalJson(view.getFloat64(0))).toBe(text);
  });

  it('refuses what JSON cannot carry, and a lone surrogate (section 3.2.2.2)', () => {
    for (const bad of [Number.NaN, Number.POSITIVE_INFINITY, 1n, () => 0, [undefined], 'a\ud800', { '\udc00': 1 }]) {
      expect(() => canonicalJson(bad)).toThrow(TypeError);
    }
  });

  it('means the same value, whatever order the keys came in', () => {
    fc.assert(
      fc.property(fc.dictionary(fc.string({ unit: 'grapheme' }), fc.jsonValue()), (value) => {
        const turned = Object.fromEntries(Object.entries(value).reverse());
        expect(canonicalJson(turned)).toBe(canonicalJson(value));
        expect(JSON.parse(canonicalJson(value))).toEqual(JSON.parse(JSON.stringify(value)));
      }),
    );
  });
});
