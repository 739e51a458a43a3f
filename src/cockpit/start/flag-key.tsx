import { useRunSettings } from '#src/cockpit/run/run-context.ts';

/** Where flag or beam starts the time, the crew marks it with the touch's own instant; a scheduled second needs no hand. */
export function FlagKey() {
  const { session } = useRunSettings();
  const { timeStart } = session.header.pack.event.rules;
  if (timeStart === 'scheduled') return null;
  return (
    <button
      type="button"
      className="key start-flag"
      disabled={session.role === 'reader'}
      onPointerDown={(event) => session.act({ type: 'start-marked.v1' }, event.timeStamp)}
    >
      {timeStart === 'flag' ? 'the flag: time starts' : 'the beam: time starts'}
    </button>
  );
}
