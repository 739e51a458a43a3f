import { formatClock, formatDuration, formatSpeed } from '#shared/course/format.ts';
import type { Pack } from '#shared/course/pack.ts';
import { DataTable, FigureCell, Row, RowHead } from '#src/paddock/parts/data-table.tsx';
import { timeErrorText } from '#src/paddock/parts/time-error.tsx';
import type { PackPlan } from './pack-plan.ts';

/** The paper backup: elapsed and clock time by place. Without a release the clock column is left blank to be filled in. */
export function PlanTable({ pack, plan, releaseMs }: { readonly pack: Pack; readonly plan: PackPlan; readonly releaseMs: number | null }) {
  const { unit } = pack.courseBook;
  const { speedUnit } = pack.settings;
  return (
    <DataTable
      caption="plan by checkpoint"
      head={[
        { name: 'place' },
        { name: 'distance', unit, figures: true },
        { name: 'target time', unit: 'elapsed', figures: true },
        { name: 'target clock', unit: pack.event.timeZone, figures: true },
        { name: 'planned', unit: 'seconds', figures: true },
        { name: 'speed there', unit: speedUnit, figures: true },
      ]}
    >
      {plan.places.map(({ checkpoint, at, targetS, plannedErrorS, speed }) => (
        <Row key={checkpoint.id}>
          <RowHead>
            <span className="font-bold">{checkpoint.name}</span>
            <span className="text-quiet block text-sm">
              {checkpoint.duty}
              {checkpoint.source === 'own' ? ', your own' : ''}
              {checkpoint.side === null ? '' : `, ${checkpoint.side}`}
              {checkpoint.note === '' ? '' : `: ${checkpoint.note}`}
            </span>
          </RowHead>
          <FigureCell>{checkpoint.at.text}</FigureCell>
          <FigureCell>{formatDuration(targetS, 1)}</FigureCell>
          <FigureCell>{releaseMs === null ? '__:__:__' : formatClock(releaseMs + targetS * 1000, pack.event.timeZone, 1)}</FigureCell>
          <FigureCell>{at <= plan.schedule.start ? null : timeErrorText(plannedErrorS, 1)}</FigureCell>
          <FigureCell>{at <= plan.schedule.start ? null : formatSpeed(speed, speedUnit)}</FigureCell>
        </Row>
      ))}
    </DataTable>
  );
}
