import './entry.css';
import { type ReactNode, useState } from 'react';
import { type EntryField, pressKey, shownText } from './entry-field.ts';
import { KeyPad } from './key-pad.tsx';

/** What the typed values mean, read back before they are set. `act` is null while something is missing. */
export interface ReadBack {
  readonly words: string;
  readonly act: (() => void) | null;
}

interface EntryProps {
  readonly title: string;
  readonly fields: readonly EntryField[];
  readonly readBack: (fields: readonly EntryField[]) => ReadBack;
  readonly done: () => void;
  readonly more?: ReactNode;
}

/** Typing on the grid with gloves: one field at a time, big keys, and the meaning read back above `set`. */
export function Entry({ title, fields: first, readBack, done, more }: EntryProps) {
  const [fields, setFields] = useState(first);
  const [active, setActive] = useState(0);
  const { words, act } = readBack(fields);
  const press = (key: string): void => setFields(fields.map((field, i) => (i === active ? pressKey(field, key) : field)));
  return (
    <main className="entry">
      <section className="entry-fields" aria-label={title}>
        <h1 className="entry-title">{title}</h1>
        {fields.map((field, i) => (
          <button key={field.id} type="button" className="entry-field" aria-pressed={i === active} onClick={() => setActive(i)}>
            <span className="quiet">{field.label}</span>
            <span className="entry-value" data-typed={field.typed !== ''}>
              {shownText(field)}
              <span className="entry-unit"> {field.unit}</span>
            </span>
          </button>
        ))}
        {more}
        <p className="entry-words" role="status">
          {words}
        </p>
      </section>
      <KeyPad press={press} point={fields[active]?.kind === 'decimal'} />
      <button type="button" className="key entry-back" onClick={done}>
        back
      </button>
      <button
        type="button"
        className="key entry-set"
        disabled={act === null}
        onClick={() => {
          act?.();
          done();
        }}
      >
        set
      </button>
    </main>
  );
}
