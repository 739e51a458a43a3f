/** The cautions that stand at sign-up, in the grid check and on the printed plan; one text for all three. */
export const CAUTIONS: readonly string[] = [
  "Only on a closed course under officials' control, or within posted limits.",
  'Officials, flags and the road outrank this screen. So do the event’s rules, local law and licensed scrutineers.',
  'Advice stays within limits and the class cap. Whether a speed is safe here and now, the driver decides.',
];

export function Cautions({ className = '' }: { readonly className?: string }) {
  return (
    <ul aria-label="cautions" className={`border-hair grid gap-1 border-l-4 pl-3 ${className}`}>
      {CAUTIONS.map((caution) => (
        <li key={caution}>{caution}</li>
      ))}
    </ul>
  );
}
