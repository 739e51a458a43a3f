import { formatDuration } from '#shared/course/format.ts';
import type { RunSheet } from '#shared/pace/run-sheet.ts';
import { FaultNotice } from '#src/components/notice.tsx';
import { TimeError } from '#src/paddock/parts/time-error.tsx';

/** What the cockpit showed at the finish beside what is derived here. A difference is displayed, never hidden. */
export function ShownAndDerived({ sheet }: { readonly sheet: RunSheet }) {
  const { shown, finish } = sheet;
  if (shown === null || finish === null) return null;
  if (shown.agrees)
    return <p className="text-quiet">The cockpit showed the same at the finish, to the millisecond (engine {shown.engine}).</p>;
  return (
    <FaultNotice>
      The cockpit showed <TimeError seconds={shown.timeErrorS} decimals={3} /> at the finish, {formatDuration(shown.elapsedS, 3)} elapsed
      (engine {shown.engine}). This run sheet derives <TimeError seconds={finish.timeErrorS} decimals={3} />,{' '}
      {formatDuration(finish.elapsedS, 3)} elapsed (engine {sheet.engine}).
    </FaultNotice>
  );
}
