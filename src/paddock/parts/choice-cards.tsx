import { type InputHTMLAttributes, useId } from 'react';

export interface Choice {
  readonly value: string;
  readonly name: string;
  /** What it does, one sentence. */
  readonly words: string;
}

/** One of a few, each with its sentence. The rest goes to every radio button, so that a form library can register them. */
export function ChoiceCards({
  legend,
  choices,
  ...input
}: { readonly legend: string; readonly choices: readonly Choice[] } & Omit<InputHTMLAttributes<HTMLInputElement>, 'type' | 'value'> & {
    readonly ref?: React.Ref<HTMLInputElement>;
  }) {
  const id = useId();
  return (
    <fieldset>
      <legend className="mb-1 font-bold">{legend}</legend>
      <div className="grid gap-3 md:grid-cols-2">
        {choices.map(({ value, name, words }) => (
          <label
            key={value}
            className="rounded-paddock border-quiet has-checked:border-ink has-checked:bg-pool has-checked:outline-ink grid grid-cols-[auto_1fr] items-start gap-x-3 border p-3 has-checked:outline"
          >
            <input
              {...input}
              type="radio"
              value={value}
              aria-labelledby={`${id}-${value}`}
              aria-describedby={`${id}-${value}-more`}
              className="mt-0.5 size-5 accent-[var(--ink)]"
            />
            <span>
              <span id={`${id}-${value}`} className="font-bold">
                {name}
              </span>
              <span id={`${id}-${value}-more`} className="text-quiet block">
                {words}
              </span>
            </span>
          </label>
        ))}
      </div>
    </fieldset>
  );
}
