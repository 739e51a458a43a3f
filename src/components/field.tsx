import { type InputHTMLAttributes, type ReactNode, type SelectHTMLAttributes, useId } from 'react';

interface FieldWords {
  readonly label: string;
  /** Stands beside the field, for example `mm`. */
  readonly unit?: string;
  readonly hint?: ReactNode;
  /** What is wrong and what to do. */
  readonly error?: string | undefined;
}

const BOX =
  'min-h-11 rounded-paddock border border-quiet bg-ground px-3 py-2 text-ink w-full aria-invalid:border-fault aria-invalid:border-2';

/** A labelled input with its unit beside it; `ref` and the rest go to the input, so that a form library can register it. */
export function TextField({
  label,
  unit,
  hint,
  error,
  className = '',
  ...input
}: FieldWords & InputHTMLAttributes<HTMLInputElement> & { readonly ref?: React.Ref<HTMLInputElement> }) {
  const own = useId();
  const id = input.id ?? own;
  return (
    <FieldFrame id={id} label={label} hint={hint} error={error} unit={unit}>
      <input {...input} id={id} aria-invalid={error !== undefined} aria-describedby={`${id}-more`} className={`${BOX} ${className}`} />
    </FieldFrame>
  );
}

export function SelectField({
  label,
  unit,
  hint,
  error,
  className = '',
  children,
  ...select
}: FieldWords & SelectHTMLAttributes<HTMLSelectElement> & { readonly ref?: React.Ref<HTMLSelectElement> }) {
  const own = useId();
  const id = select.id ?? own;
  return (
    <FieldFrame id={id} label={label} hint={hint} error={error} unit={unit}>
      <select {...select} id={id} aria-invalid={error !== undefined} aria-describedby={`${id}-more`} className={`${BOX} ${className}`}>
        {children}
      </select>
    </FieldFrame>
  );
}

function FieldFrame({
  id,
  label,
  unit,
  hint,
  error,
  children,
}: Omit<FieldWords, 'error' | 'unit'> & {
  readonly id: string;
  readonly error: string | undefined;
  readonly unit: string | undefined;
  readonly children: ReactNode;
}) {
  return (
    <div className="grid gap-1">
      <label htmlFor={id} className="font-bold">
        {label}
      </label>
      <div className="flex items-center gap-2">
        {children}
        {unit === undefined ? null : <span className="text-quiet font-figure shrink-0">{unit}</span>}
      </div>
      <div id={`${id}-more`} className="grid gap-1">
        {error === undefined ? null : (
          <p role="alert" className="border-fault border-l-4 pl-2">
            {error}
          </p>
        )}
        {hint === undefined ? null : <p className="text-quiet">{hint}</p>}
      </div>
    </div>
  );
}
