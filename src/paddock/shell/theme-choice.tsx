import { useState } from 'react';
import { chooseTheme, currentTheme, THEMES, type Theme } from '#src/components/theme.ts';

export function ThemeChoice() {
  const [theme, setTheme] = useState<Theme>(currentTheme);
  const choose = (next: Theme) => {
    chooseTheme(next);
    setTheme(next);
  };
  return (
    <label className="text-quiet flex items-center gap-2 text-sm">
      light
      <select
        className="rounded-paddock border-quiet bg-ground text-ink min-h-9 border px-2"
        value={theme}
        onChange={(event) => choose(event.target.value as Theme)}
      >
        {THEMES.map((name) => (
          <option key={name} value={name}>
            {name}
          </option>
        ))}
      </select>
    </label>
  );
}
