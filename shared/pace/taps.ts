import type { ButtonV1 } from '#shared/journal/observation.ts';
import type { OdometerChange } from '#shared/pace/odometer.ts';
import { odometerNow } from '#shared/pace/odometer-now.ts';
import { nominalMetres, type RunState, type TapAct, type TapRaw } from '#shared/pace/run-state.ts';
import { lastKnotAt, type Raw, rawAt, withHeat } from '#shared/pace/track.ts';
import { wrappedDifference } from '#shared/pace/wheel.ts';

/** Touches as recorded: the instant that counts, and the raw values then. What they mean is `derive`'s to say. */

/** A sensor may be this late; after that a touch must do with what there is. */
const LATEST_US = 2_000_000;
const SPEED_OVER_US = 500_000;
/** A box that lost some records may report several presses at once; more is no hand. */
const MOST_PRESSES = 5;

/** Records a touch; its raw values come with the next knot. */
export function addTap(state: RunState, tap: Pick<TapAct, 'seq' | 'at' | 'input' | 'checkpoint'>): void {
  const t = Math.round(tap.at - state.pack.settings.tapLeadMs[tap.input] * 1000);
  const { seq, at, input, checkpoint } = tap;
  state.acts.taps.push({ seq, at, input, checkpoint, t, raw: null, firm: false });
  state.acts.pending++;
  settleTaps(state);
}

/** A wired button: every press more than before is a touch. The first count ever seen is a baseline. */
export function pressButton(state: RunState, o: ButtonV1): boolean {
  const key = String(o.button);
  const memory = state.buttons[key];
  if (memory === undefined) {
    state.buttons[key] = { presses: o.presses, suspect: null };
    return false;
  }
  const more = wrappedDifference(o.presses, memory.presses);
  if (more >= 0 && more <= MOST_PRESSES) {
    memory.presses = o.presses;
    memory.suspect = null;
    return more > 0 && press(state, o);
  }
  const since = memory.suspect === null ? -1 : wrappedDifference(o.presses, memory.suspect);
  if (since < 0 || since > MOST_PRESSES) {
    // a box that restarted, or one wild record: the next one tells
    memory.suspect = o.presses;
    return false;
  }
  memory.presses = o.presses;
  memory.suspect = null;
  return since > 0 && press(state, o);
}

function press(state: RunState, o: ButtonV1): boolean {
  addTap(state, { seq: o.seq, at: o.at, input: 'wired', checkpoint: null });
  return true;
}

/**
 * Gives waiting touches their raw values: by interpolation once a knot at or after their instant has come, carried forward when
 * none came in 2 s. True when any changed.
 */
export function settleTaps(state: RunState): boolean {
  const { acts, odometer, now } = state;
  if (acts.pending === 0) return false;
  const last = lastKnotAt(odometer.track);
  let changed = false;
  for (const tap of acts.taps) {
    if (tap.firm) continue;
    if (last !== null && last >= tap.t) {
      tap.raw = rawWithSpeed(state, tap.t);
      tap.firm = true;
      acts.pending--;
      changed = true;
    } else if (tap.raw === null && now - tap.at > LATEST_US) {
      tap.raw = carried(state, tap.t);
      changed = tap.raw !== null || changed;
    }
  }
  return changed;
}

const atSpeed = ({ w, g, h, u }: Raw, v: number): TapRaw => ({ w, g, h, u, v });

function rawWithSpeed(state: RunState, t: number): TapAct['raw'] {
  const { track } = state.odometer;
  const [raw, before] = [rawAt(track, t), rawAt(track, t - SPEED_OVER_US)];
  if (raw === null || before === null) return null;
  const metres = (raw.w - before.w) * nominalMetres(state) + (raw.g - before.g);
  return atSpeed(raw, (Math.max(0, metres) * 1e6) / SPEED_OVER_US);
}

function carried(state: RunState, t: number): TapAct['raw'] {
  const now = odometerNow(state.odometer, t, nominalMetres(state));
  return now.source === 'none' && lastKnotAt(state.odometer.track) === null
    ? null
    : atSpeed(withHeat(state.odometer.track, t, now), now.speed ?? 0);
}

/** Bridged metres became counts: touches and launches in that stretch are told anew like the track. */
export function rewriteTaps(state: RunState, { from, w, g, share }: NonNullable<OdometerChange['rewritten']>): void {
  for (const tap of state.acts.taps) {
    if (tap.t <= from || tap.raw === null) continue;
    tap.raw = atSpeed(withHeat(state.odometer.track, tap.t, { w: w + (tap.raw.g - g) * share, g }), tap.raw.v);
  }
}
