import type { ReactNode } from 'react';

/** A table of figures: hairlines between rows, figures to the right so that decimal points stand under each other. */
export function DataTable({
  caption,
  head,
  children,
}: {
  readonly caption: string;
  readonly head: readonly Column[];
  readonly children: ReactNode;
}) {
  return (
    // biome-ignore lint/a11y/noNoninteractiveTabindex: a region that scrolls must be reachable from the keyboard
    <section className="overflow-x-auto" tabIndex={0} aria-label={caption}>
      <table className="w-full border-collapse text-base md:max-xl:text-sm">
        <caption className="spoken-only">{caption}</caption>
        <thead>
          <tr className="border-ink border-b">
            {head.map((column) => (
              <th
                key={column.name}
                scope="col"
                className={`text-quiet px-1.5 py-2 md:px-2 align-bottom font-normal first:pl-0 whitespace-nowrap ${column.figures === true ? 'text-right' : 'text-left'} ${fromWidth(column.wide)}`}
              >
                {column.name}
                {column.unit === undefined ? null : <span className="block text-sm">{column.unit}</span>}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>{children}</tbody>
      </table>
    </section>
  );
}

export interface Column {
  readonly name: string;
  readonly unit?: string;
  readonly figures?: boolean;
  readonly wide?: Wide;
}

/** Left out on a phone; or on anything narrower than a laptop, where another column says the same. */
type Wide = boolean | 'laptop';

function fromWidth(wide: Wide | undefined): string {
  if (wide === 'laptop') return 'hidden xl:table-cell';
  return wide === true ? 'hidden md:table-cell' : '';
}

export function Row({ children, className = '' }: { readonly children: ReactNode; readonly className?: string }) {
  return <tr className={`border-hair border-b align-top ${className}`}>{children}</tr>;
}

export function RowHead({ children }: { readonly children: ReactNode }) {
  return (
    <th scope="row" className="bg-ground sticky left-0 min-w-28 px-1.5 py-2 md:min-w-32 md:px-2 text-left font-normal first:pl-0">
      {children}
    </th>
  );
}

export function Cell({
  children,
  className = '',
  wide = false,
}: {
  readonly children: ReactNode;
  readonly className?: string;
  readonly wide?: Wide;
}) {
  return <td className={`px-1.5 py-2 first:pl-0 md:px-2 lg:min-w-36 ${fromWidth(wide)} ${className}`}>{children}</td>;
}

/** A figure in its column; a dash where there is none. */
export function FigureCell({ children, wide = false }: { readonly children: string | null; readonly wide?: Wide }) {
  return (
    <td className={`font-figure px-1.5 py-2 text-right whitespace-pre first:pl-0 md:px-2 ${fromWidth(wide)}`}>
      {children ?? <span className="text-quiet">–</span>}
    </td>
  );
}
