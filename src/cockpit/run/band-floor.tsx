import { formatSpeed } from '#shared/course/format.ts';
import type { Readout } from '#shared/pace/readout.ts';
import { LiveText } from '#src/cockpit/live/live-text.tsx';
import { useStructure } from '#src/cockpit/live/use-live.ts';
import { errorText, holdWords, toGoText } from '#src/cockpit/view/words.ts';
import { zoneShown } from '#src/cockpit/view/zone-shown.ts';
import { useRunSettings } from './run-context.ts';

/** On the pool's floor: the speed to hold, the limit where one is near, and the schedule when the band speaks of the plan. */
export function BandFloor() {
  const { session, speedUnit, distanceUnit } = useRunSettings();
  const { practice, clockRate } = session.header;
  const structure = useStructure();
  const zone = zoneShown(structure);
  const over = structure.warnings.some((warning) => warning.code === 'over-limit' || warning.code === 'over-cap');
  return (
    <div className="band-floor">
      <div className="floor-figure">
        {structure.hold.kind === 'none' ? null : (
          <LiveText
            className="hold-speed"
            of={(readout) => (readout.hold.kind === 'none' ? '' : formatSpeed(readout.hold.speed, speedUnit))}
          />
        )}
        <span className={structure.hold.kind === 'hold' ? 'quiet' : 'strong'}>
          <LiveText of={(readout) => holdWords(readout.hold).join('\n')} />
        </span>
      </div>
      {zone === null ? null : (
        <div className="floor-figure" data-over={over}>
          <span className="limit-speed">{formatSpeed(zone.limit, speedUnit)}</span>
          <span className="quiet">
            limit
            {'\n'}
            <LiveText of={(readout) => zoneText(readout, distanceUnit)} />
          </span>
        </div>
      )}
      <div className="floor-schedule quiet">
        {practice ? `practice ${clockRate}×\n` : null}
        <LiveText of={scheduleText} />
      </div>
    </div>
  );
}

function zoneText(readout: Readout, unit: 'km' | 'mi'): string {
  if (readout.zone !== null) return `${toGoText(readout.zone.endsIn, unit)} left`;
  return readout.zoneAhead === null ? '' : `in ${toGoText(readout.zoneAhead.startsIn, unit)}`;
}

/** Said only where it differs from the band: against the schedule, and what the plan wants here. */
function scheduleText(readout: Readout): string {
  if (readout.timeError === null || readout.band === null) return '';
  const { decimals, against, side } = readout.band;
  if (against === 'schedule') return side === 'level' ? errorText(readout.timeError, decimals) : '';
  return `${errorText(readout.timeError, 1)}\nplan ${errorText(readout.planned, 1)}`;
}
