import { useRef } from 'react';
import type { Band as BandReadout, Readout } from '#shared/pace/readout.ts';
import { useLiveModel, usePainter } from '#src/cockpit/live/use-live.ts';
import { ThemeKey } from '#src/cockpit/theme-key.tsx';
import { openness, poolShare } from '#src/cockpit/view/band-geometry.ts';
import { createSteadyFigure } from '#src/cockpit/view/steady-figure.ts';
import { isEscorted, sideWord, stepsAsText } from '#src/cockpit/view/words.ts';
import { BandFloor } from './band-floor.tsx';

/** Signed by the side, so that the slab stands where the word says: late and below sink the pool. */
const signed = (band: BandReadout): number => (band.side === 'late' || band.side === 'below' ? band.magnitude : -band.magnitude);

/**
 * The driver's picture: an even line that never moves and a pool whose edge is to be brought to it. Side, texture,
 * colour and word each say the same alone; level is a calm pool and the word.
 */
export function Band() {
  const root = useRef<HTMLElement>(null);
  const figure = useRef<HTMLSpanElement>(null);
  const word = useRef<HTMLSpanElement>(null);
  const early = useRef<HTMLDivElement>(null);
  const late = useRef<HTMLDivElement>(null);
  const pool = useRef<HTMLDivElement>(null);
  const steady = useRef(createSteadyFigure());
  const lastTap = useRef<string>('');
  const model = useLiveModel();

  usePainter('figures', (readout) => {
    const band = readout.band;
    const side = band?.side ?? 'level';
    write(root.current, 'data-side', side);
    writeText(word.current, band === null ? (isEscorted(readout) ? 'escort' : '') : sideWord(side));
    const tap = tapKey(readout);
    if (band !== null && side !== 'level') {
      const steps = steady.current.show(band.magnitude, band.decimals === 1 ? 10 : 100, tap !== lastTap.current);
      writeText(figure.current, stepsAsText(steps, band.decimals));
    }
    lastTap.current = tap;
  });
  usePainter('every frame', ({ band, targetTime, elapsed }) => {
    const open = openness(targetTime - (elapsed ?? 0));
    const share = band === null || band.side === 'level' ? 0 : poolShare(signed(band), open);
    moveTo(late.current, Math.max(0, share) - 1);
    moveTo(pool.current, Math.max(0, share));
    moveTo(early.current, 1 + Math.min(0, share));
  });

  return (
    <section ref={root} className="band" aria-label="time error" data-side={model.structure().band?.side ?? 'level'}>
      <div className="band-head" role="timer">
        <span ref={figure} className="band-figure" />
        <span ref={word} className="band-word" />
      </div>
      <ThemeKey className="band-theme" />
      <div className="band-window">
        <div ref={early} className="slab slab-early" />
      </div>
      <div className="band-line" />
      <div className="band-window">
        <div ref={pool} className="pool-body" />
        <div ref={late} className="slab slab-late" />
      </div>
      <BandFloor />
    </section>
  );
}

const tapKey = (readout: Readout): string => `${readout.lastTap?.seq}${readout.lastTap?.verdict}`;

/** In whole shares of the element's own height: compositor only, no layout. */
function moveTo(element: HTMLElement | null, share: number): void {
  if (element === null) return;
  const transform = `translateY(${(share * 100).toFixed(2)}%)`;
  if (element.style.transform !== transform) element.style.transform = transform;
}

function write(element: Element | null, name: string, value: string): void {
  if (element !== null && element.getAttribute(name) !== value) element.setAttribute(name, value);
}

function writeText(element: Element | null, words: string): void {
  if (element !== null && element.textContent !== words) element.textContent = words;
}
