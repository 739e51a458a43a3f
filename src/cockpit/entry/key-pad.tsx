import { useEffect, useRef } from 'react';
import { Icon } from '#src/components/icon.tsx';

const KEYS = ['1', '2', '3', '4', '5', '6', '7', '8', '9', '.', '0', '⌫'] as const;
const NAMES: Readonly<Record<string, string>> = { '.': 'point', '⌫': 'delete last' };

/** Twelve big keys; a real keyboard types as well. */
export function KeyPad({ press, point }: { readonly press: (key: string) => void; readonly point: boolean }) {
  const newest = useRef(press);
  useEffect(() => {
    newest.current = press;
  });
  useEffect(() => {
    const typed = (event: KeyboardEvent): void => {
      if (/^[\d.]$/u.test(event.key)) newest.current(event.key);
      if (event.key === 'Backspace') newest.current('⌫');
    };
    addEventListener('keydown', typed);
    return () => removeEventListener('keydown', typed);
  }, []);
  return (
    <fieldset className="key-pad" aria-label="keys">
      {KEYS.map((key) => (
        <button key={key} type="button" className="key" disabled={key === '.' && !point} aria-label={NAMES[key]} onClick={() => press(key)}>
          {key === '⌫' ? <Icon name="erase" /> : key}
        </button>
      ))}
    </fieldset>
  );
}
