import { formatClock, formatDistance, formatDuration } from '#shared/course/format.ts';
import type { Readout } from '#shared/pace/readout.ts';
import { decimalDigits } from '#src/cockpit/entry/entry-field.ts';
import { LiveText } from '#src/cockpit/live/live-text.tsx';
import { useStructure } from '#src/cockpit/live/use-live.ts';
import { useRunSettings } from '#src/cockpit/run/run-context.ts';

export type Setting = 'release' | 'target' | 'staged' | 'limit' | 'line' | 'clock';

/** The release and its countdown, large; below, everything that may still be typed in, each a key as wide as the column. */
export function GridSettings({ change }: { readonly change: (setting: Setting) => void }) {
  const { session, timeZone, distanceUnit } = useRunSettings();
  const structure = useStructure();
  const course = session.course();
  const rows: readonly { readonly setting: Setting; readonly label: string; readonly value: string }[] = [
    { setting: 'target', label: 'target', value: formatDuration(course.targetTimeMs / 1000, course.targetTimeMs % 1000 === 0 ? 0 : 3) },
    { setting: 'staged', label: 'behind the line', value: `${decimalDigits(course.stagedBehindM, 1)} m` },
    { setting: 'limit', label: 'limits', value: String(course.zones.length) },
    { setting: 'line', label: 'finish at', value: `${formatDistance(course.lengthM, distanceUnit, 3)} ${distanceUnit}` },
  ];
  return (
    <section className="panel grid-settings" aria-label="release and what may be changed">
      <button type="button" className="key key-bare grid-release" disabled={session.role === 'reader'} onClick={() => change('release')}>
        <span className="quiet">release{structure.release === null ? ' not known' : ''}</span>
        <span className="grid-clock" data-known={structure.release !== null}>
          {structure.release === null ? 'type it in' : formatClock(structure.release, timeZone)}
        </span>
        <LiveText className="quiet" of={untilRelease} />
      </button>
      {session.header.practice ? <PracticeRelease /> : null}
      {rows.map((row) => (
        <button
          key={row.setting}
          type="button"
          className="key key-bare grid-row"
          disabled={session.role === 'reader'}
          onClick={() => change(row.setting)}
        >
          <span className="quiet">{row.label}</span>
          <span>{row.value}</span>
        </button>
      ))}
      <p className="grid-now quiet">
        official <LiveText of={(readout) => (readout.official === null ? '–' : formatClock(readout.official.now, timeZone))} />
      </p>
    </section>
  );
}

function untilRelease(readout: Readout): string {
  if (readout.toRelease === null) return '';
  return readout.toRelease > 0 ? `in ${formatDuration(Math.ceil(readout.toRelease))}` : 'has passed';
}

/** In practice nobody waits for a starter. */
function PracticeRelease() {
  const { session } = useRunSettings();
  const releaseIn = (seconds: number): void => {
    const now = session.readout().official?.now;
    if (now !== undefined) session.act({ type: 'release-set.v1', releaseMs: (Math.floor(now / 1000) + seconds) * 1000 });
  };
  return (
    <div className="grid-practice">
      <button type="button" className="key" onClick={() => releaseIn(30)}>
        in 0:30
      </button>
      <button type="button" className="key" onClick={() => releaseIn(120)}>
        in 2:00
      </button>
    </div>
  );
}
