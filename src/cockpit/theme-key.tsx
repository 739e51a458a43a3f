import { useState } from 'react';
import { Icon } from '#src/components/icon.tsx';
import { chooseTheme, currentTheme, THEMES } from '#src/components/theme.ts';

/** One key walks through night, noon, dusk and red: the light in a car changes within a corner. */
export function ThemeKey({ className = '' }: { readonly className?: string }) {
  const [theme, setTheme] = useState(currentTheme);
  const next = THEMES[(THEMES.indexOf(theme) + 1) % THEMES.length] ?? 'night';
  return (
    <button
      type="button"
      className={`key key-bare ${className}`}
      aria-label={`light: ${theme}, change to ${next}`}
      onClick={() => {
        chooseTheme(next);
        setTheme(next);
      }}
    >
      <Icon name="sun" />
    </button>
  );
}
