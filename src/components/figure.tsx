import type { ReactNode } from 'react';

/** A figure that explains itself by its unit or word, for example `3.4 late`. */
export function Figure({ value, word, className = '' }: { readonly value: string; readonly word?: string; readonly className?: string }) {
  return (
    <span className={`figure ${className}`}>
      {value}
      {word === undefined ? null : <span className="font-normal"> {word}</span>}
    </span>
  );
}

/** Label on the left, figure on the right, a hairline under both. */
export function FigureRow({ label, children }: { readonly label: string; readonly children: ReactNode }) {
  return (
    <div className="border-hair flex items-baseline justify-between gap-4 border-b py-2">
      <dt className="text-quiet">{label}</dt>
      <dd className="figure">{children}</dd>
    </div>
  );
}
