import { type ReactNode, useEffect, useRef } from 'react';
import uPlot from 'uplot';
import 'uplot/dist/uPlot.min.css';

/** Colours and faces of a chart, read from the theme's tokens when it is drawn. */
export interface ChartInk {
  readonly ink: string;
  readonly quiet: string;
  readonly hair: string;
  readonly zone: string;
  readonly ground: string;
  readonly late: string;
}

export type ChartOptions = (ink: ChartInk, width: number) => uPlot.Options;

/**
 * A uPlot canvas that follows the width of its place and the theme. The words beside it say what it shows: a canvas says
 * nothing to a screen reader, the table under it does.
 */
export function ChartFrame({
  label,
  data,
  options,
  height,
  children,
}: {
  readonly label: string;
  readonly data: uPlot.AlignedData;
  readonly options: ChartOptions;
  readonly height: number;
  readonly children?: ReactNode;
}) {
  const place = useRef<HTMLDivElement>(null);
  useEffect(() => {
    const element = place.current;
    if (element === null) return;
    let plot: uPlot | null = null;
    const draw = (): void => {
      plot?.destroy();
      plot = new uPlot(options(readInk(element), element.clientWidth), data, element);
    };
    draw();
    const resized = new ResizeObserver(() => plot?.setSize({ width: element.clientWidth, height }));
    resized.observe(element);
    const themed = new MutationObserver(draw);
    themed.observe(document.documentElement, { attributes: true, attributeFilter: ['data-theme'] });
    return () => {
      resized.disconnect();
      themed.disconnect();
      plot?.destroy();
    };
  }, [data, options, height]);
  return (
    <figure className="my-4">
      <div ref={place} role="img" aria-label={label} />
      {children === undefined ? null : <figcaption className="text-quiet mt-2 text-sm">{children}</figcaption>}
    </figure>
  );
}

function readInk(element: HTMLElement): ChartInk {
  const style = getComputedStyle(element);
  const token = (name: string): string => style.getPropertyValue(`--${name}`).trim();
  return {
    ink: token('ink'),
    quiet: token('quiet'),
    hair: token('hair'),
    zone: token('zone'),
    ground: token('ground'),
    late: token('late'),
  };
}
