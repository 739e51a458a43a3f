import type { Observation, PulseV1, UnknownObservation } from '#shared/journal/observation.ts';
import { advise, isAdviceDue } from '#shared/pace/advice.ts';
import { offerClock, takePps } from '#shared/pace/clock-hear.ts';
import { hearBox, takeClockPair, takeEpoch } from '#shared/pace/clock-life.ts';
import { derive } from '#shared/pace/derive.ts';
import { appendNodes } from '#shared/pace/derive-node.ts';
import { rolledThrough, startGate } from '#shared/pace/derive-start.ts';
import { distanceOf } from '#shared/pace/distance.ts';
import { takeGnss } from '#shared/pace/gnss-source.ts';
import { changeCourse } from '#shared/pace/grid-changes.ts';
import type { OdometerChange } from '#shared/pace/odometer.ts';
import { modelOf, nominalMetres, type RunState } from '#shared/pace/run-state.ts';
import { soundness } from '#shared/pace/sound.ts';
import { surveyedOf } from '#shared/pace/surveyed.ts';
import { addTap, pressButton, rewriteTaps, settleTaps } from '#shared/pace/taps.ts';
import { knotAt } from '#shared/pace/track.ts';
import { beginAnew } from '#shared/pace/wheel.ts';
import { takePulse } from '#shared/pace/wheel-source.ts';
import { never } from '#shared/result.ts';

/**
 * One observation into the state. Total: whatever a journal holds, in whatever order, it never throws; what makes no sense is
 * counted, what is unknown is named. Deterministic, and changes nothing but the state.
 */
export function step(state: RunState, o: Observation | UnknownObservation): void {
  state.observations++;
  state.lastSeq = o.seq;
  const kind = soundness(o);
  if (kind !== 'known') {
    if (kind === 'unsound') state.ignored++;
    else if (!state.unknownTypes.includes(o.type)) state.unknownTypes.push(o.type);
    return;
  }
  if (o.at > state.now) state.now = o.at;
  let stale = o.type === 'pulse.v1' ? hearPulse(state, o as PulseV1) : take(state, o as Exclude<Observation, PulseV1>);
  if (state.acts.pending > 0 && settleTaps(state)) stale = true;
  if (stale) derive(state);
  // a touch sets no rhythm: one that is taken back would have left another
  if (isAdviceDue(state) && !isTouch(o.type)) advise(state);
}

const isTouch = (type: string): boolean =>
  type === 'tap.v1' || type === 'tap-voided.v1' || type === 'tap-moved.v1' || type === 'tap-accepted.v1';

/** Nearly all observations are pulses: theirs is a way of its own, short enough to be compiled in one piece. */
function hearPulse(state: RunState, o: PulseV1): boolean {
  const { pack } = state;
  hearBox(state.clock, o.at, o.boxUs);
  return takeChange(state, takePulse(state.odometer, o, pack.wheel, pack.raceClass.aids, nominalMetres(state)));
}

/** Records the observation; true when what was derived so far may no longer hold. */
function take(state: RunState, o: Exclude<Observation, PulseV1>): boolean {
  const { acts, pack } = state;
  switch (o.type) {
    case 'fix.v1':
      return takeChange(
        state,
        takeGnss(state.odometer, o, pack.raceClass.aids, state.now, nominalMetres(state), surveyedOf(state), pack.wheel.driven === true),
      );
    case 'button.v1':
      return pressButton(state, o);
    case 'clock.v1':
      return offerClock(state.clock, o, state.now, isReleased(state));
    case 'epoch.v1':
      return takeEpoch(state.clock, o, isReleased(state));
    case 'clock-pair.v1':
      takeClockPair(state.clock, o);
      return false;
    case 'sensor-lost.v1':
      if (o.sensor !== 'geolocation') acts.sensorLostAt = o.at;
      return false;
    case 'sensor-gained.v1':
      if (o.sensor !== 'geolocation') gainWheel(state, o.sensor);
      return false;
    case 'pps.v1':
      hearBox(state.clock, o.at, o.boxUs);
      return takePps(state.clock, o.at, state.now, isReleased(state));
    case 'note.v1':
      return false;
    default:
      return takeAct(state, o);
  }
}

/** Counters of another sensor have nothing to do with those before: the wheel and the wired buttons begin anew. */
function gainWheel(state: RunState, sensor: string): void {
  state.acts.sensorLostAt = null;
  if (state.wheelSensor !== null && state.wheelSensor !== sensor) {
    beginAnew(state.odometer.wheel);
    beginAnew(state.odometer.second.channel);
    state.buttons = {};
  }
  state.wheelSensor = sensor;
}

type Act = Exclude<
  Observation,
  {
    type:
      | 'pulse.v1'
      | 'fix.v1'
      | 'button.v1'
      | 'clock.v1'
      | 'epoch.v1'
      | 'clock-pair.v1'
      | 'sensor-lost.v1'
      | 'sensor-gained.v1'
      | 'pps.v1'
      | 'note.v1';
  }
>;

function takeAct(state: RunState, o: Act): boolean {
  const { acts } = state;
  switch (o.type) {
    case 'tap.v1':
      addTap(state, { seq: o.seq, at: o.at, input: o.input, checkpoint: o.checkpoint });
      return true;
    case 'tap-voided.v1':
      acts.voided.push(o.tap);
      return true;
    case 'tap-moved.v1':
      acts.moved.push({ tap: o.tap, checkpoint: o.checkpoint });
      return true;
    case 'tap-accepted.v1':
      acts.accepted.push(o.tap);
      return true;
    case 'checkpoint-skipped.v1':
      acts.skipped.push(o.checkpoint);
      return true;
    case 'start-marked.v1':
      acts.startMarks.push(o.at);
      return true;
    case 'release-set.v1':
    case 'target-set.v1':
    case 'staged-set.v1':
    case 'limit-set.v1':
    case 'line-moved.v1':
      if (changeCourse(state, o)) return true;
      state.ignored++;
      return false;
    case 'run-stopped.v1':
      if (acts.stops.every((s) => s.to !== null)) acts.stops.push({ from: o.at, to: null });
      return false;
    case 'run-resumed.v1':
      return resume(state, o.at, o.as === 'escort');
    case 'run-ended.v1':
      acts.ended = { at: o.at, outcome: o.outcome };
      return false;
    case 'finish-shown.v1':
      acts.finishShown ??= { engine: o.engine, elapsedMs: o.elapsedMs, timeErrorMs: o.timeErrorMs };
      return false;
    default:
      return never(o);
  }
}

function resume(state: RunState, at: number, escort: boolean): boolean {
  const stop = state.acts.stops.find((s) => s.to === null);
  if (stop !== undefined) stop.to = Math.max(at, stop.from);
  state.acts.escort = escort;
  return false;
}

function isReleased(state: RunState): boolean {
  const { releaseAt } = state.derived;
  return releaseAt !== null && state.now >= releaseAt;
}

/** After a knot: does anything derived change? Places passed by distance, the start, taps in a rewritten stretch. */
function takeChange(state: RunState, change: OdometerChange): boolean {
  if (change.rewritten !== null) rewriteTaps(state, change.rewritten);
  const stale = change.rewritten !== null || change.launch !== 'none';
  if (change.node && !stale && !appendNodes(state)) return true;
  if (!change.traced) return stale;
  return stale || passesNext(state) || rollsThrough(state);
}

function passesNext(state: RunState): boolean {
  const { anchors, nextD } = state.derived;
  const anchor = anchors[anchors.length - 1];
  const { trace } = state.odometer.track;
  return anchor !== undefined && nextD !== null && distanceOf(anchor, knotAt(trace, trace.at.length - 1)) >= nextD;
}

function rollsThrough(state: RunState): boolean {
  if (state.derived.start !== 'standing') return false;
  const gate = startGate(state, state.derived.releaseAt);
  return gate !== null && state.now >= gate && rolledThrough(state, gate);
}

/** Builds the course once, so that a pack that cannot be driven fails at `begin` and never in a run. */
export function settle(state: RunState): void {
  modelOf(state);
  derive(state);
}
