import type { Pack } from '#shared/course/pack.ts';
import type { NewObservation, Observation } from '#shared/journal/observation.ts';
import type { Readout } from '#shared/pace/readout.ts';
import { begin, type RunState, readout, step } from '#shared/pace/run.ts';
import type { LegRow, RunSheet } from '#shared/pace/run-sheet.ts';
import { runSheet } from '#shared/pace/sheet.ts';
import { micros } from '#shared/units.ts';
import { RELEASE_US } from '#tests/unit/pace/drives.ts';
import { headerOf } from '#tests/unit/pace/packs.ts';

/** Session instant of t seconds after the release. */
export const us = (t: number): number => Math.round(RELEASE_US + t * 1e6);

/** Any observation at t seconds after the release. */
export const act = (t: number, o: { readonly type: string; readonly [key: string]: unknown }): NewObservation =>
  ({ at: us(t), ...o }) as unknown as NewObservation;

export function fold(p: Pack, observations: readonly Observation[]): RunState {
  const state = begin(p);
  for (const o of observations) step(state, o);
  return state;
}

/** Readouts at seconds after the release, each with everything folded that had happened by then. */
export function look(p: Pack, observations: readonly Observation[], times: readonly number[]): Readout[] {
  const state = begin(p);
  let i = 0;
  return times.map((t) => {
    for (; i < observations.length && (observations[i] as Observation).at <= us(t); i++) step(state, observations[i] as Observation);
    return readout(state, micros(us(t)));
  });
}

export const sheetOf = (p: Pack, observations: readonly Observation[]): RunSheet => runSheet(fold(p, observations), headerOf(p));

export function leg(sheet: RunSheet, id: string): LegRow {
  const row = sheet.legs.find((l) => l.checkpointId === id);
  if (row === undefined) throw new Error(`no leg ${id}`);
  return row;
}
