import { formatDistance, formatDuration, roundedDigits } from '#shared/course/format.ts';
import type { LegRow } from '#shared/pace/run-sheet.ts';
import type { DistanceUnit } from '#shared/units.ts';
import { Cell, DataTable, FigureCell, Row, RowHead } from '#src/paddock/parts/data-table.tsx';
import { timeErrorText } from '#src/paddock/parts/time-error.tsx';
import { BY_WORDS, keptText, movedText } from './run-words.ts';

export function LegTable({ legs, unit }: { readonly legs: readonly LegRow[]; readonly unit: DistanceUnit }) {
  return (
    <DataTable
      caption="checkpoints"
      head={[
        { name: 'checkpoint' },
        { name: 'elapsed', figures: true, wide: true },
        { name: 'time error', unit: 'seconds', figures: true },
        { name: 'planned', unit: 'seconds', figures: true },
        { name: 'official', unit, figures: true, wide: true },
        { name: 'measured', unit, figures: true, wide: 'laptop' },
        { name: 'moved', unit: 'm', figures: true },
        { name: 'wheel scale', unit: 'mm a pulse' },
      ]}
    >
      {legs.map((leg) => (
        <Leg key={leg.checkpointId} leg={leg} unit={unit} />
      ))}
    </DataTable>
  );
}

function Leg({ leg, unit }: { readonly leg: LegRow; readonly unit: DistanceUnit }) {
  return (
    <Row className={leg.by === 'not reached' ? 'text-quiet' : ''}>
      <RowHead>
        <span className="font-bold">{leg.name}</span>
        <span className="text-quiet block text-sm">
          {leg.duty}
          {leg.duty === 'start' ? '' : `, ${BY_WORDS[leg.by]}`}
        </span>
      </RowHead>
      <FigureCell wide>{leg.elapsedS === null ? null : formatDuration(leg.elapsedS, 2)}</FigureCell>
      <FigureCell>{leg.timeErrorS === null ? null : timeErrorText(leg.timeErrorS, 2)}</FigureCell>
      <FigureCell>{leg.duty === 'start' || leg.duty === 'stop board' ? null : timeErrorText(leg.plannedS, 2)}</FigureCell>
      <FigureCell wide>{formatDistance(leg.officialM, unit, 3)}</FigureCell>
      <FigureCell wide="laptop">{leg.measuredM === null ? null : formatDistance(leg.measuredM, unit, 3)}</FigureCell>
      <FigureCell>{movedText(leg.movedM)}</FigureCell>
      <Cell>{leg.by === 'not reached' ? <span className="font-figure">–</span> : <Scale leg={leg} />}</Cell>
    </Row>
  );
}

/** Before and after where it changed; where it did not, the reason. */
function Scale({ leg }: { readonly leg: LegRow }) {
  const before = roundedDigits(leg.scaleBefore, 3);
  const after = roundedDigits(leg.scaleAfter, 3);
  return (
    <>
      <span className="font-figure whitespace-nowrap">{before === after ? after : `${before} to ${after}`}</span>
      {leg.scaleKept === null ? null : <span className="text-quiet block text-sm">{keptText(leg.scaleKept)}</span>}
    </>
  );
}
