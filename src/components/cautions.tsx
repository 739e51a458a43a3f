import { CAUTIONS } from '#shared/cautions.ts';

/** The cautions as a list; the words are shared by every page and the printed plan. */
export function Cautions({ className = '' }: { readonly className?: string }) {
  return (
    <ul aria-label="cautions" className={`border-hair grid gap-1 border-l-4 pl-3 ${className}`}>
      {CAUTIONS.map((caution) => (
        <li key={caution.id}>{caution.text}</li>
      ))}
    </ul>
  );
}
