import type { ReactNode } from 'react';
import { formatDistance, formatDuration, roundedDigits } from '#shared/course/format.ts';
import type { LegRow, RunSheet } from '#shared/pace/run-sheet.ts';
import { Figure, FigureRow } from '#src/components/figure.tsx';
import { FaultNotice } from '#src/components/notice.tsx';
import { sureText } from '#src/components/sure-text.ts';
import type { CourseMarks } from '#src/paddock/parts/course-chart.ts';
import { TimeError } from '#src/paddock/parts/time-error.tsx';
import { dayAndClock } from '#src/paddock/parts/when.ts';
import { LegTable } from './leg-table.tsx';
import { RunChart } from './run-chart.tsx';
import { misfitText } from './run-words.ts';
import { ShownAndDerived } from './shown-and-derived.tsx';

/** What a run sheet needs besides itself: where and in which units it happened. */
export interface SheetPlace {
  readonly unit: CourseMarks['unit'];
  readonly zones: CourseMarks['zones'];
  readonly timeZone: string;
}

/** Did a touch move the distance by less than it was off? The simple rules never do that. */
const isShared = (leg: LegRow): boolean =>
  leg.measuredM !== null && leg.movedM !== null && Math.abs(leg.officialM - leg.measuredM - leg.movedM) > 0.05;

export function RunSheetView({ sheet, place }: { readonly sheet: RunSheet; readonly place: SheetPlace }) {
  return (
    <>
      <Summary sheet={sheet} />
      <ShownAndDerived sheet={sheet} />
      <RunChart sheet={sheet} unit={place.unit} zones={place.zones} />
      <LegTable legs={sheet.legs} unit={place.unit} />
      {sheet.legs.some(isShared) && (
        <p className="text-quiet mt-2 max-w-prose">
          The estimator moves the distance by the share a touch deserves beside wheel, GNSS and the navigator's lead: <i>moved</i> is less
          than <i>official</i> less <i>measured</i>.
        </p>
      )}
      <div className="mt-8 grid gap-x-12 gap-y-8 md:grid-cols-2">
        <Facts sheet={sheet} place={place} />
        <Incidents sheet={sheet} place={place} />
      </div>
    </>
  );
}

function Summary({ sheet }: { readonly sheet: RunSheet }) {
  const { finish, reactionS } = sheet;
  return (
    <div className="mb-4 flex flex-wrap items-end gap-x-12 gap-y-4">
      <p>
        <span className="text-quiet block">{finish === null ? `outcome` : 'finish, own and unofficial'}</span>
        {finish === null ? (
          <Figure className="text-4xl" value={sheet.outcome} />
        ) : (
          <>
            <TimeError className="text-5xl" seconds={finish.timeErrorS} decimals={2} />
            <span className="font-figure text-quiet ml-3">{sureText(finish.sigmaS)}</span>
          </>
        )}
      </p>
      <Small label="reaction at the start">
        {reactionS === null ? '–' : `${roundedDigits(reactionS, 2)} s${reactionS < 0 ? ' before' : ''}`}
      </Small>
      <Small label="elapsed">{finish === null ? '–' : formatDuration(finish.elapsedS, 2)}</Small>
      <Small label="target time">{formatDuration(sheet.targetTimeS, 2)}</Small>
    </div>
  );
}

function Small({ label, children }: { readonly label: string; readonly children: ReactNode }) {
  return (
    <p>
      <span className="text-quiet block">{label}</span>
      <span className="figure text-lg whitespace-normal">{children}</span>
    </p>
  );
}

function Facts({ sheet, place }: { readonly sheet: RunSheet; readonly place: SheetPlace }) {
  return (
    <section aria-labelledby="facts">
      <h2 id="facts" className="mb-2 text-xl font-bold">
        What was used
      </h2>
      <dl>
        {sheet.releaseMs === null ? null : (
          <FigureRow label="release">
            <span className="block text-right whitespace-normal">{dayAndClock(sheet.releaseMs, place.timeZone)}</span>
          </FigureRow>
        )}
        <FigureRow label="aids">{sheet.aidsUsed.length === 0 ? 'none' : sheet.aidsUsed.join(', ')}</FigureRow>
        <FigureRow label="wheel pulses">{groupDigits(sheet.pulses)}</FigureRow>
        <FigureRow label="observations">{groupDigits(sheet.observations)}</FigureRow>
        <FigureRow label="derived by engine">{sheet.engine}</FigureRow>
        {sheet.practice ? <FigureRow label="practice">never counts</FigureRow> : null}
        {sheet.clockRate === 1 ? null : <FigureRow label="session clock">{roundedDigits(sheet.clockRate, 0)} times as fast</FigureRow>}
      </dl>
    </section>
  );
}

function Incidents({ sheet, place }: { readonly sheet: RunSheet; readonly place: SheetPlace }) {
  const unused = sheet.taps.filter(({ verdict }) => verdict !== 'used');
  const nothing = sheet.warnings.length + sheet.stops.length + unused.length + sheet.unknownTypes.length === 0;
  return (
    <section aria-labelledby="incidents">
      <h2 id="incidents" className="mb-2 text-xl font-bold">
        What to know
      </h2>
      {sheet.unknownTypes.length === 0 ? null : (
        <FaultNotice>
          This journal needs a newer Evenline: it holds {sheet.unknownTypes.join(', ')}. Everything is kept; the figures here leave it out.
        </FaultNotice>
      )}
      {nothing ? <p className="text-quiet">No stop, no warning, every touch used.</p> : null}
      <ul className="list-disc pl-5">
        {sheet.stops.map((stop) => (
          <li key={stop.fromS}>
            stopped at {formatDistance(stop.d, place.unit, 2)} {place.unit}, {formatDuration(stop.fromS, 0)} after the start
            {stop.toS === null ? ', to the end' : `, for ${formatDuration(stop.toS - stop.fromS, 0)}`}
          </li>
        ))}
        {unused.map((tap) => (
          <li key={tap.seq}>
            touch {tap.checkpoint === null ? '' : `at ${nameOf(sheet, tap.checkpoint)} `}not used: {tap.verdict}
            {misfitText(tap)}
          </li>
        ))}
        {sheet.warnings.map((warning) => (
          <li key={warning}>{warning}</li>
        ))}
      </ul>
    </section>
  );
}

const nameOf = (sheet: RunSheet, checkpointId: string): string =>
  sheet.legs.find((leg) => leg.checkpointId === checkpointId)?.name ?? checkpointId;

const groupDigits = (n: number): string => new Intl.NumberFormat('en-GB', { useGrouping: true }).format(n);
