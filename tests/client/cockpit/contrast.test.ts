import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';

/** Contrast ratio of two sRGB colours. Source: WCAG 2.2, definitions of relative luminance and contrast ratio. */
function contrast(a: string, b: string): number {
  const luminance = (hex: string): number => {
    const [r = 0, g = 0, bl = 0] = [1, 3, 5]
      .map((i) => Number.parseInt(hex.slice(i, i + 2), 16) / 255)
      .map((c) => (c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4));
    return 0.2126 * r + 0.7152 * g + 0.0722 * bl;
  };
  const [high = 0, low = 0] = [luminance(a), luminance(b)].sort((x, y) => y - x);
  return (high + 0.05) / (low + 0.05);
}

const css = readFileSync('src/index.css', 'utf8');

function tokens(theme: string): Record<string, string> {
  const block = new RegExp(`\\[data-theme=["']${theme}["']\\]\\s*\\{([^}]*)\\}`, 'u').exec(css)?.[1] ?? '';
  return Object.fromEntries([...block.matchAll(/--([a-z-]+):\s*(#[0-9a-f]{6})/gu)].map(([, name, value]) => [name, value]));
}

it('measures black on white as 21 to 1', () => {
  expect(contrast('#000000', '#ffffff')).toBeCloseTo(21, 9);
});

describe.each(['night', 'noon', 'dusk', 'red'])('theme %s', (theme) => {
  const { ground = '', pool = '', ink = '', quiet = '', fault = '', zone = '' } = tokens(theme);

  it('shows cockpit figures at 12:1 or more on ground and on pool', () => {
    expect(contrast(ink, ground)).toBeGreaterThanOrEqual(12);
    expect(contrast(ink, pool)).toBeGreaterThanOrEqual(12);
  });

  it('shows quiet text at 4.5:1 or more on ground and on pool', () => {
    expect(contrast(quiet, ground)).toBeGreaterThanOrEqual(4.5);
    expect(contrast(quiet, pool)).toBeGreaterThanOrEqual(4.5);
  });

  it('shows the fault sign at 3:1 or more (WCAG 2.2, 1.4.11) and the own trace over zones', () => {
    expect(contrast(fault, ground)).toBeGreaterThanOrEqual(3);
    expect(contrast(fault, pool)).toBeGreaterThanOrEqual(3);
    expect(contrast(ink, zone)).toBeGreaterThanOrEqual(4.5);
  });
});
