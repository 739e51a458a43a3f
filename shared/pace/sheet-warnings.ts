import type { CourseModel } from '#shared/pace/course-model.ts';
import type { RunState } from '#shared/pace/run-state.ts';

/** What a reader of the run sheet should know about how its figures came to be, in sentences. */
export function sheetWarnings(state: RunState, model: CourseModel): string[] {
  const { odometer, clock, derived } = state;
  const { wheel, fills, second } = odometer;
  const lines: string[] = [];
  const say = (condition: boolean, line: string): void => {
    if (condition) lines.push(line);
  };
  say(
    state.unknownTypes.length > 0,
    `The journal holds types this engine does not know (${state.unknownTypes.join(', ')}): the result needs a newer Evenline.`,
  );
  say(state.ignored > 0, `${count(state.ignored, 'observation')} made no sense and ${were(state.ignored)} left out.`);
  say(wheel.wild > 0, `${count(wheel.wild, 'wheel record')} did not follow from the others and ${were(wheel.wild)} dropped.`);
  say(wheel.restarts > 0, `The pulse box restarted ${times(wheel.restarts)}; its count went on from there.`);
  say(odometer.bridges > 0, `The wheel fell silent ${times(odometer.bridges)}; GNSS carried the distance on.`);
  const unmeasured = odometer.losses.filter((loss) => loss.by === undefined).length;
  say(unmeasured > 0, `Distance was lost ${times(unmeasured)}: nothing measured it.`);
  say(fills.count > 0, `Pulses were missing ${times(fills.count)}: ${metres(fills.metres)} were filled in by the speeds around.`);
  say(second.standIns > 0, `The second wheel stood in ${times(second.standIns)}, for ${metres(second.standInMetres)}.`);
  say(
    second.pair.disagreements > 0,
    `The two wheels disagreed ${times(second.pair.disagreements)}: one of them slipped, or a tyre lost air.`,
  );
  say(wheel.sign < 0, 'The wheel sensor counts down while the car goes forwards: its count was mirrored.');
  for (const { byMs } of clock.slept)
    lines.push(`The device's clocks came apart by ${Math.round(byMs)} ms: it slept, or its wall clock was set.`);
  for (const { source, byMs, times } of clock.doubts)
    lines.push(`${SOURCE[source]} contradicted the official clock by ${(byMs / 1000).toFixed(3)} s (${times} in a row).`);
  const source = clock.chosen?.source;
  say(source === undefined, 'No official clock was known.');
  say(source === 'wall' || source === 'device', "The official clock was never checked: the device's own was taken.");
  say(derived.start === 'rolling', 'The car was not standing at the release: distance begins where it was then.');
  const off = model.schedule.difference;
  say(
    Math.abs(off) > 0.0005,
    `The sections add up to ${Math.abs(off).toFixed(3)} s ${off > 0 ? 'less' : 'more'} than the official target time, which decides.`,
  );
  const doubted = derived.taps.filter((t) => t.verdict === 'doubted').length;
  say(doubted > 0, `${count(doubted, 'tap')} ${were(doubted)} doubted and not used.`);
  return lines;
}

const SOURCE = { exchange: 'The server', nmea: 'The receiver’s time', pps: 'The pulse per second', tap: 'A set of touches' } as const;
const count = (n: number, noun: string): string => `${n} ${noun}${n === 1 ? '' : 's'}`;
const were = (n: number): string => (n === 1 ? 'was' : 'were');
const metres = (m: number): string => `${Math.round(m)}\u00a0m`;
const times = (n: number): string => (n === 1 ? 'once' : `${n} times`);
