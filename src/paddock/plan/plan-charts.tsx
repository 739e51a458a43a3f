import { useCallback, useMemo } from 'react';
import type uPlot from 'uplot';
import { printedMetres } from '#shared/course/convert.ts';
import type { Pack } from '#shared/course/pack.ts';
import { metresPerSecondPer } from '#shared/units.ts';
import { ChartFrame, type ChartInk, type ChartOptions } from '#src/paddock/parts/chart-frame.tsx';
import { acrossIn, type CourseMarks, courseOptions, ownSeries, planSeries } from '#src/paddock/parts/course-chart.ts';
import { type PackPlan, profile } from './pack-plan.ts';

const ERROR_HEIGHT = 260;
const SPEED_HEIGHT = 220;

export function PlanCharts({ pack, plan }: { readonly pack: Pack; readonly plan: PackPlan }) {
  const { unit } = pack.courseBook;
  const marks = useMemo(() => marksOf(pack, plan), [pack, plan]);
  const errors = useMemo(() => along(plan, unit, (x) => -plan.plan.plannedErrorAt(x)), [plan, unit]);
  const perUnit = metresPerSecondPer(pack.settings.speedUnit);
  const speeds = useMemo(() => along(plan, unit, (x) => plan.plan.speedAt(x) / perUnit), [plan, unit, perUnit]);
  const errorOptions = useCallback<ChartOptions>(
    (ink, width) => courseOptions(ink, width, ERROR_HEIGHT, marks, [planSeries(ink)]),
    [marks],
  );
  const speedOptions = useCallback<ChartOptions>((ink, width) => speedChart(ink, width, marks), [marks]);
  return (
    <>
      <ChartFrame label="planned time error along the course" data={errors} options={errorOptions} height={ERROR_HEIGHT}>
        Planned time error along the course: early above the line, late below. Pale columns are zones.
      </ChartFrame>
      <ChartFrame label="planned speed along the course" data={speeds} options={speedOptions} height={SPEED_HEIGHT}>
        Planned speed, {pack.settings.speedUnit}.
      </ChartFrame>
    </>
  );
}

function along(plan: PackPlan, unit: CourseMarks['unit'], valueAt: (x: number) => number): uPlot.AlignedData {
  const across = acrossIn(unit);
  const points = profile(plan.schedule, valueAt);
  return [points.map(([x]) => across(x)), points.map(([, value]) => value)];
}

export function marksOf(pack: Pack, plan: Pick<PackPlan, 'places'>): CourseMarks {
  return {
    unit: pack.courseBook.unit,
    zones: [...pack.courseBook.zones, ...pack.crewZones].map(({ from, to, limit }) => ({
      from: printedMetres(from),
      to: printedMetres(to),
      limit: `${limit.text} ${limit.unit}`,
    })),
    dots: plan.places.map(({ at }) => ({ at, filled: false })),
  };
}

function speedChart(ink: ChartInk, width: number, marks: CourseMarks): uPlot.Options {
  const options = courseOptions(ink, width, SPEED_HEIGHT, { ...marks, dots: [] }, [{ ...ownSeries(ink), width: 2 }]);
  const [across, up] = options.axes ?? [];
  return {
    ...options,
    scales: { x: { time: false }, y: { range: (_plot, _low, high) => [0, (high ?? 1) * 1.1] } },
    axes: [across ?? {}, { ...up, values: (_plot, ticks) => ticks.map((tick) => String(tick)) }],
  };
}
