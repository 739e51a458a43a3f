import { type Goal, goalsOf, type Table } from './goals.ts';
import { METHODS, type Method } from './methods.ts';
import { SETTINGS, type SettingName } from './settings.ts';
import type { Accuracy } from './statistics.ts';

/** The tables a person reads. */

const whole = (value: number): string => value.toFixed(0);
const share = (value: number): string => value.toFixed(3);

const COLUMNS: readonly (readonly [string, (a: Accuracy) => string])[] = [
  ['finish RMS', (a) => whole(a.finishRmsMs)],
  ['95 %', (a) => whole(a.finish95Ms)],
  ['median', (a) => whole(a.finishMedianMs)],
  ['last tenth', (a) => whole(a.lastTenthRmsMs)],
  ['course', (a) => whole(a.courseRmsMs)],
  ['result RMS', (a) => whole(a.resultRmsMs)],
  ['95 %', (a) => whole(a.result95Ms)],
  ['within 2 sigma', (a) => (Number.isNaN(a.within2Sigma) ? '' : share(a.within2Sigma))],
];

export function reportOf(table: Table): string {
  const parts = (Object.keys(table) as SettingName[]).map((name) => settingTable(name, table[name] ?? {}));
  return [...parts, goalsTable(goalsOf(table))].join('\n\n');
}

function settingTable(name: SettingName, methods: Partial<Record<Method, Accuracy>>): string {
  const ran = METHODS.filter((method) => methods[method] !== undefined);
  const ratio = methods.ratio?.finishRmsMs;
  const rows = ran.map((method) => {
    const accuracy = methods[method] as Accuracy;
    const against = ratio === undefined ? '' : share(accuracy.finishRmsMs / ratio);
    return [method, ...COLUMNS.map(([, show]) => show(accuracy)), against];
  });
  const drives = methods[ran[0] as Method]?.drives ?? 0;
  return `${name} (${SETTINGS[name].title}), ${drives} drives, ms\n${aligned([['', ...COLUMNS.map(([title]) => title), '/ ratio'], ...rows])}`;
}

function goalsTable(goals: readonly Goal[]): string {
  const rows = goals.map(({ what, value, bound, met }) => [what, share(value), bound, met ? '' : 'missed']);
  return aligned([['goal', 'value', 'bound', ''], ...rows]);
}

function aligned(rows: readonly (readonly string[])[]): string {
  const widths = (rows[0] as readonly string[]).map((_, column) => Math.max(...rows.map((row) => (row[column] ?? '').length)));
  const line = (row: readonly string[]): string =>
    row.map((cell, column) => (column === 0 ? cell.padEnd(widths[0] ?? 0) : cell.padStart(widths[column] ?? 0))).join('  ');
  return rows.map((row) => line(row).trimEnd()).join('\n');
}
