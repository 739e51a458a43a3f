import { bandOf } from '#shared/pace/band.ts';
import { clockSigmaMs, officialMsAt } from '#shared/pace/clock.ts';
import { zoneAt } from '#shared/pace/course-model.ts';
import { startGate } from '#shared/pace/derive-start.ts';
import { nextCheckpoint } from '#shared/pace/next-checkpoint.ts';
import type { Hold, Readout, TapVerdict, ZoneAhead } from '#shared/pace/readout.ts';
import { type DerivedTap, modelOf, type RunState } from '#shared/pace/run-state.ts';
import { type Situation, situationAt } from '#shared/pace/situation.ts';
import { warningsAt } from '#shared/pace/warnings.ts';
import { type Micros, metres, metresPerSecond, seconds, unixMs } from '#shared/units.ts';

/** What the crew is shown at one instant of the session clock, at or after the last observation. Changes nothing. */
export function readoutAt(state: RunState, at: Micros): Readout {
  const s = situationAt(state, at);
  const { derived, changes, clock } = state;
  const { chosen } = clock;
  const gate = startGate(state, derived.releaseAt);
  const lastTap = derived.taps[derived.taps.length - 1];
  const initial = state.pack.wheel.mmPerPulse;
  return {
    phase: s.phase,
    official:
      chosen === null
        ? null
        : {
            now: unixMs(officialMsAt(chosen, at)),
            sigma: seconds(clockSigmaMs(clock, at) / 1000),
            source: chosen.source,
            age: seconds((at - chosen.at) / 1e6),
          },
    release: changes.releaseMs === null ? null : unixMs(changes.releaseMs),
    toRelease: gate === null ? null : seconds((gate - at) / 1e6),
    elapsed: s.elapsed === null ? null : seconds(s.elapsed),
    targetTime: s.model.schedule.targetTime,
    distance: metres(s.distance),
    speed: s.speed === null ? null : metresPerSecond(Math.max(0, s.speed)),
    scale: { mmPerPulse: s.mmPerPulse, changedBy: s.mmPerPulse / initial - 1 },
    timeError: s.timeError === null ? null : seconds(s.timeError),
    planned: seconds(s.planned),
    againstPlan: s.timeError === null ? null : seconds(s.timeError - s.planned),
    sigma: seconds(s.sigma),
    band: bandOf(state, s),
    hold: holdOf(state, s),
    noReturn: noReturnOf(state, s),
    next: nextCheckpoint(state, s),
    ...zonesOf(s),
    source: s.source,
    lastTap: lastTap === undefined ? null : verdictOf(state, lastTap),
    warnings: warningsAt(state, s),
    finish: finishOf(s),
  };
}

function holdOf(state: RunState, s: Situation): Hold {
  const { hold } = state.shown;
  if (hold === null || state.acts.escort) return { kind: 'none' };
  if (s.phase === 'stopped' || s.phase === 'finished' || s.phase === 'ended') return { kind: 'none' };
  const speed = metresPerSecond(hold.speed);
  if (hold.kind === 'hold') return { kind: 'hold', speed, frozen: hold.frozen };
  return { kind: hold.kind, by: seconds(hold.by), speed };
}

function noReturnOf({ shown, acts }: RunState, s: Situation): Readout['noReturn'] {
  const { noReturn } = shown.plan;
  if (noReturn === null || s.phase !== 'running' || acts.escort) return null;
  return { at: metres(noReturn.x), in: seconds(Math.max(0, (noReturn.at - s.at) / 1e6)) };
}

function zonesOf(s: Situation): Pick<Readout, 'zone' | 'zoneAhead'> {
  const here = zoneAt(s.model, s.distance);
  const ahead = s.model.zones.find((z) => z.from > s.distance) ?? null;
  const show = (z: { name: string; from: number; to: number; limit: number } | null): ZoneAhead | null =>
    z === null
      ? null
      : { name: z.name, limit: metresPerSecond(z.limit), startsIn: metres(z.from - s.distance), endsIn: metres(z.to - s.distance) };
  return { zone: show(here), zoneAhead: show(ahead) };
}

export function verdictOf(state: RunState, tap: DerivedTap): TapVerdict {
  const place = modelOf(state).places.find((p) => p.checkpoint.id === tap.checkpoint);
  return { ...tap, checkpoint: place?.checkpoint ?? null, moved: metres(tap.moved) };
}

function finishOf(s: Situation): Readout['finish'] {
  if (s.finish === null) return null;
  const board = s.model.places.find((p) => p.checkpoint.duty === 'stop board');
  return {
    elapsed: seconds(s.finish.elapsed),
    timeError: seconds(s.finish.timeError),
    sigma: seconds(s.finish.sigma),
    stopBoardIn: board === undefined ? null : metres(board.d - s.distance),
  };
}
