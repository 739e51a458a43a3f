import uPlot from 'uplot';
import { formatTimeError } from '#shared/course/format.ts';
import { type DistanceUnit, metresPer } from '#shared/units.ts';
import type { ChartInk } from './chart-frame.tsx';

/**
 * What every chart along a course shares: official distance across, the even line at zero, early above it and late below,
 * zones as pale columns with their limit, checkpoints as dots on the line.
 */
export interface CourseMarks {
  readonly unit: DistanceUnit;
  readonly zones: readonly { readonly from: number; readonly to: number; readonly limit: string }[];
  /** `filled`: touched. Open: passed by distance, or still to come. */
  readonly dots: readonly { readonly at: number; readonly filled: boolean }[];
}

const FIGURES = "'JetBrains Mono', monospace";

export function courseOptions(ink: ChartInk, width: number, height: number, marks: CourseMarks, series: uPlot.Series[]): uPlot.Options {
  const font = `13px ${FIGURES}`;
  return {
    width,
    height,
    padding: [24, 28, 0, 0],
    cursor: { show: false },
    legend: { show: false },
    scales: { x: { time: false }, y: { range: evenRange } },
    axes: [
      {
        stroke: ink.quiet,
        font,
        grid: { show: false },
        ticks: { stroke: ink.hair },
        size: 36,
        values: (_plot, ticks) => ticks.map((tick, i) => (i === ticks.length - 1 ? `${tick} ${marks.unit}` : String(tick))),
      },
      {
        stroke: ink.quiet,
        font,
        size: 92,
        gap: 12,
        grid: { stroke: ink.hair, width: 1 },
        ticks: { show: false },
        values: (_plot, ticks) => ticks.map((tick) => timeErrorTick(-tick, ticks)),
      },
    ],
    series: [{}, ...series],
    hooks: { drawClear: [(plot) => drawZones(plot, ink, marks, font)], draw: [(plot) => drawLine(plot, ink, marks)] },
  };
}

/** Room on both sides of the line, so that it stays a line to look at and not an edge. */
function evenRange(_plot: uPlot, low: number | null, high: number | null): uPlot.Range.MinMax {
  const most = Math.max(Math.abs(low ?? 0), Math.abs(high ?? 0), 0.5);
  return [Math.min((low ?? 0) * 1.15, -most * 0.25), Math.max((high ?? 0) * 1.15, most * 0.25)];
}

function timeErrorTick(seconds: number, ticks: readonly number[]): string {
  const step = Math.abs((ticks[1] ?? 1) - (ticks[0] ?? 0));
  const decimals = Number.isInteger(step) ? 0 : Number.isInteger(step * 10) ? 1 : 2;
  const { magnitude, word } = formatTimeError(seconds, decimals);
  return word === 'level' ? '0' : `${magnitude} ${word}`;
}

/** One number of the unit across: metres in, the unit out. */
export const acrossIn = (unit: DistanceUnit) => (m: number) => m / metresPer(unit);

function drawZones(plot: uPlot, ink: ChartInk, marks: CourseMarks, font: string): void {
  const { ctx, bbox } = plot;
  const across = acrossIn(marks.unit);
  ctx.save();
  ctx.font = scaled(font);
  ctx.textAlign = 'center';
  ctx.textBaseline = 'bottom';
  for (const zone of marks.zones) {
    const from = plot.valToPos(across(zone.from), 'x', true);
    const to = plot.valToPos(across(zone.to), 'x', true);
    ctx.fillStyle = ink.zone;
    ctx.fillRect(from, bbox.top, Math.max(to - from, 2 * uPlot.pxRatio), bbox.height);
    ctx.fillStyle = ink.quiet;
    ctx.fillText(zone.limit, (from + to) / 2, bbox.top - 4 * uPlot.pxRatio);
  }
  ctx.restore();
}

function drawLine(plot: uPlot, ink: ChartInk, marks: CourseMarks): void {
  const { ctx, bbox } = plot;
  const across = acrossIn(marks.unit);
  const zero = plot.valToPos(0, 'y', true);
  const ratio = uPlot.pxRatio;
  ctx.save();
  ctx.setLineDash([]);
  ctx.fillStyle = ink.ink;
  ctx.fillRect(bbox.left, zero - ratio, bbox.width, 2 * ratio);
  for (const dot of marks.dots) {
    ctx.beginPath();
    ctx.arc(plot.valToPos(across(dot.at), 'x', true), zero, 5 * ratio, 0, 2 * Math.PI);
    ctx.fillStyle = dot.filled ? ink.ink : ink.ground;
    ctx.fill();
    ctx.lineWidth = 2 * ratio;
    ctx.strokeStyle = ink.ink;
    ctx.stroke();
  }
  ctx.restore();
}

/** uPlot draws in device pixels; a font is given in CSS pixels. */
function scaled(font: string): string {
  return font.replace(/(\d+)px/, (_, size: string) => `${Number(size) * uPlot.pxRatio}px`);
}

export const ownSeries = (ink: ChartInk): uPlot.Series => ({ stroke: ink.ink, width: 3, points: { show: false } });
export const planSeries = (ink: ChartInk): uPlot.Series => ({ stroke: ink.quiet, width: 2, dash: [2, 5], points: { show: false } });
