import type { RecordedDrive } from './recorded-drive.ts';
import { replay, type Shown } from './replay.ts';
import { type Scenario, scenariosOf } from './scenario.ts';

export interface Row {
  readonly source: string;
  readonly corrections: string;
  readonly drives: number;
  /** Root mean square over the course, and at the true finish (with its sign where there is one drive, RMS of several). */
  readonly distanceRmsM: number;
  readonly distanceEndM: number;
  readonly timeRmsS: number;
  readonly timeEndS: number;
  /** Share of the looks at which the shown time error lay within two of its stated sigma. */
  readonly within2Sigma: number;
}

const rms = (values: readonly number[]): number => Math.sqrt(values.reduce((sum, v) => sum + v * v, 0) / values.length);

function rowOf(scenario: Scenario, shown: readonly Shown[]): Row {
  const end = (values: readonly number[]): number => (values.length === 1 ? (values[0] ?? Number.NaN) : rms(values));
  return {
    source: scenario.source,
    corrections: scenario.corrections,
    drives: shown.length,
    distanceRmsM: rms(shown.flatMap((s) => s.metres)),
    distanceEndM: end(shown.map((s) => s.end.metres)),
    timeRmsS: rms(shown.flatMap((s) => s.seconds)),
    timeEndS: end(shown.map((s) => s.end.seconds)),
    within2Sigma: shown.reduce((sum, s) => sum + s.within2Sigma, 0) / shown.length,
  };
}

const SEEDS = 8;

/** Every scenario of a drive; those with touches over several navigators' scatters. */
export function rowsOf(drive: RecordedDrive, quick: boolean): Row[] {
  return scenariosOf(drive, quick).map((scenario) => {
    const runs = scenario.touches && !quick ? SEEDS : 1;
    return rowOf(
      scenario,
      Array.from({ length: runs }, (_, seed) => replay(drive, scenario, seed + 1)),
    );
  });
}

const HEAD = ['source', 'at places', 'distance RMS m', 'end m', 'time RMS s', 'end s', 'within 2σ'];

export function tableOf(drive: RecordedDrive, rows: readonly Row[]): string {
  const cells = rows.map((r) => [
    r.source,
    r.corrections,
    r.distanceRmsM.toFixed(2),
    r.distanceEndM.toFixed(2),
    r.timeRmsS.toFixed(3),
    r.timeEndS.toFixed(3),
    `${(100 * r.within2Sigma).toFixed(0)} %`,
  ]);
  const all = [HEAD, ...cells];
  const widths = HEAD.map((_, column) => Math.max(...all.map((row) => row[column]?.length ?? 0)));
  const line = (row: readonly string[]): string =>
    row
      .map((cell, column) => (column < 2 ? cell.padEnd(widths[column] ?? 0) : cell.padStart(widths[column] ?? 0)))
      .join('  ')
      .trimEnd();
  return `${drive.name}: ${(drive.lengthM / 1000).toFixed(1)} km; truth by ${drive.truthBy}\n${all.map(line).join('\n')}`;
}
