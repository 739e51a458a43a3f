import { formatSpeed } from '#shared/course/format.ts';
import type { NextCheckpoint } from '#shared/pace/readout.ts';
import { LiveText } from '#src/cockpit/live/live-text.tsx';
import { useStructure } from '#src/cockpit/live/use-live.ts';
import { fittingSize } from '#src/cockpit/view/names.ts';
import { distanceText, durationText, errorText, toGoText } from '#src/cockpit/view/words.ts';
import { sureText } from '#src/components/sure-text.ts';
import { useRunSettings } from './run-context.ts';
import { StopKey } from './stop-key.tsx';
import { VerdictLine } from './verdict-line.tsx';
import { WarningLines } from './warning-lines.tsx';

const SIZES = [46, 38, 30, 25] as const;
/** Width of the name at 1280x800, design pixels. */
const NAME_WIDTH = 352;

/** The navigator's column: the next place, what is to go, and what became of the last touch. */
export function CheckpointPanel() {
  const { speedUnit, distanceUnit } = useRunSettings();
  const { next } = useStructure();
  return (
    <section className="panel" aria-label="next checkpoint">
      <div className="panel-top">
        <span className="panel-count">{next === null ? 'after the finish' : countText(next)}</span>
        <StopKey />
      </div>
      {next === null ? null : (
        <>
          <h2 className="panel-name" data-size={fittingSize(next.checkpoint.name, NAME_WIDTH, 2, SIZES)}>
            {next.checkpoint.name}
          </h2>
          <dl className="panel-rows">
            <Row label="to go" of={(r) => (r.next === null ? '' : toGoText(r.next.toGo, distanceUnit))} />
            <Row label="in" of={(r) => (r.next?.eta == null ? '–' : durationText(r.next.eta))} />
            <Row label="plan there" of={(r) => (r.next === null ? '' : errorText(r.next.planned, 1))} />
            <Row label="sure to" of={(r) => sureText(r.sigma)} />
            <div className="panel-row panel-here">
              <dd>
                <LiveText of={(r) => distanceText(r.distance, distanceUnit)} />
              </dd>
              <dd>
                <LiveText of={(r) => (r.speed === null ? '–' : `${formatSpeed(r.speed, speedUnit)} ${speedUnit}`)} />
              </dd>
            </div>
          </dl>
        </>
      )}
      <div className="panel-foot">
        <WarningLines />
        <VerdictLine />
      </div>
    </section>
  );
}

/** Two short lines beside the red-flag key: the side to look at, and which of the places it is. */
function countText(next: NextCheckpoint): string {
  const { side } = next.checkpoint;
  return `${side === null ? 'checkpoint' : `on the ${side}`}\n${next.index} of ${next.of}`;
}

function Row({ label, of }: { readonly label: string; readonly of: Parameters<typeof LiveText>[0]['of'] }) {
  return (
    <div className="panel-row">
      <dt>{label}</dt>
      <dd>
        <LiveText of={of} />
      </dd>
    </div>
  );
}
