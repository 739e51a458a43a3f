/** The theme of this device. Kept in localStorage because it must be known before the first paint and is nobody's secret. */
export const THEMES = ['night', 'noon', 'dusk', 'red'] as const;
export type Theme = (typeof THEMES)[number];

const KEY = 'evenline.theme';

const isTheme = (value: string | null): value is Theme => THEMES.some((theme) => theme === value);

/** What was chosen here, else what the device prefers. */
export function currentTheme(): Theme {
  const kept = readKept();
  if (isTheme(kept)) return kept;
  return globalThis.matchMedia?.('(prefers-color-scheme: light)').matches ? 'noon' : 'night';
}

export function chooseTheme(theme: Theme): void {
  try {
    localStorage.setItem(KEY, theme);
  } catch {
    // Storage refused: the choice holds until the page goes.
  }
  applyTheme(theme);
}

export function applyTheme(theme: Theme): void {
  document.documentElement.setAttribute('data-theme', theme);
  const ground = getComputedStyle(document.documentElement).getPropertyValue('--ground').trim();
  document.querySelector('meta[name="theme-color"]')?.setAttribute('content', ground);
}

function readKept(): string | null {
  try {
    return localStorage.getItem(KEY);
  } catch {
    return null;
  }
}
