/**
 * The plan, drawn: one level line, with a slab of time owed under it or in hand over it.
 * `slab` lies between `from` and `to` (0..1 of the width); late hangs under the line, early stands on it.
 */
export interface Slab {
  readonly side: 'late' | 'early';
  readonly from: number;
  readonly to: number;
}

export function EvenLine({ slabs = [], className = '' }: { readonly slabs?: readonly Slab[]; readonly className?: string }) {
  return (
    <svg className={`even-line ${className}`} viewBox="0 0 100 14" preserveAspectRatio="none" aria-hidden="true">
      {slabs.map((slab) => (
        <rect
          key={`${slab.side}${slab.from}`}
          x={slab.from * 100}
          width={(slab.to - slab.from) * 100}
          y={slab.side === 'late' ? 8 : 0}
          height={6}
          fill={`var(--${slab.side})`}
        />
      ))}
      <rect x="0" y="6" width="100" height="2" fill="currentColor" />
    </svg>
  );
}

/** How far something has come: the line is the way, the pool's edge the part that is done. */
export function EvenLineProgress({ done, label }: { readonly done: number; readonly label: string }) {
  const share = Math.min(1, Math.max(0, done));
  return (
    <div role="progressbar" aria-label={label} aria-valuemin={0} aria-valuemax={100} aria-valuenow={Math.round(share * 100)}>
      <svg className="even-line" viewBox="0 0 100 14" preserveAspectRatio="none" aria-hidden="true">
        <rect x="0" y="6" width="100" height="2" fill="var(--hair)" />
        <rect x="0" y="5" width={share * 100} height="4" fill="currentColor" />
      </svg>
    </div>
  );
}
