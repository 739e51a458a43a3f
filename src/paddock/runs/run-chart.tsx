import { useCallback, useMemo } from 'react';
import type uPlot from 'uplot';
import type { RunSheet } from '#shared/pace/run-sheet.ts';
import { ChartFrame, type ChartOptions } from '#src/paddock/parts/chart-frame.tsx';
import { acrossIn, type CourseMarks, courseOptions, ownSeries, planSeries } from '#src/paddock/parts/course-chart.ts';

const HEIGHT = 320;

/** Time error along the course: own in ink, plan dotted and quiet; early above the line, late below. */
export function RunChart({
  sheet,
  unit,
  zones,
}: {
  readonly sheet: RunSheet;
  readonly unit: CourseMarks['unit'];
  readonly zones: CourseMarks['zones'];
}) {
  const data = useMemo<uPlot.AlignedData>(() => {
    const across = acrossIn(unit);
    return [
      sheet.trace.map(({ d }) => across(d)),
      sheet.trace.map(({ plannedS }) => -plannedS),
      sheet.trace.map(({ timeErrorS }) => -timeErrorS),
    ];
  }, [sheet, unit]);
  const options = useCallback<ChartOptions>(
    (ink, width) => {
      const dots = sheet.legs
        .filter(({ duty }) => duty !== 'stop board')
        .map(({ officialM, by }) => ({ at: officialM, filled: by === 'tap' }));
      return courseOptions(ink, width, HEIGHT, { unit, zones, dots }, [planSeries(ink), ownSeries(ink)]);
    },
    [sheet, unit, zones],
  );
  if (sheet.trace.length < 2) return <p className="text-quiet py-4">No distance was measured, so there is no line to draw.</p>;
  return (
    <ChartFrame label="time error along the course, against the plan" data={data} options={options} height={HEIGHT}>
      Time error along the course: early above the line, late below. Full line: this run. Dotted: the plan. Filled dots were touched. Pale
      columns are zones with their limit.
    </ChartFrame>
  );
}
