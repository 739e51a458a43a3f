import { availableParallelism } from 'node:os';
import type { Table } from './accuracy/goals.ts';
import { isMethod, METHODS, type Method, usesGnss } from './accuracy/methods.ts';
import { runTasks, type Task } from './accuracy/pool.ts';
import { reportOf } from './accuracy/report.ts';
import { SETTING_NAMES, type SettingName, worldOf } from './accuracy/settings.ts';
import { accuracyOf } from './accuracy/statistics.ts';
import type { Bench } from './figures.ts';

/**
 * How well each way of keeping distance keeps the time error: simulated drives, driver in the loop, through the engine itself.
 * Figures depend on the seeds alone, not on the machine, its load or the number of threads.
 */
const DRIVES = 2000;
const QUICK = { drives: 60, settings: ['base', 'gross', 'rough'] } as const;
/** Drives a thread takes at a time. */
const PART = 20;

export const bench: Bench = async ({ quick, only, methods, drives }) => {
  const settings = chosen(only ?? (quick ? QUICK.settings : SETTING_NAMES), isSetting, SETTING_NAMES, 'setting');
  const wanted = methods === undefined ? null : chosen(methods, isMethod, METHODS, 'method');
  const count = drives ?? (quick ? QUICK.drives : DRIVES);
  const cells = settings.flatMap((setting) =>
    (wanted ?? METHODS).map((method) => ({ setting, method, world: worldOf(setting, usesGnss(method)) })),
  );
  const worlds = new Map(cells.map(({ world, method }) => [`${world} ${method}`, parts(world, method, count)]));
  const tasks = [...worlds.values()].flat();
  const outcomes = await runTasks(tasks, availableParallelism(), progress(tasks.length));
  const table: Table = {};
  for (const { setting, method, world } of cells) {
    const own = worlds.get(`${world} ${method}`) ?? [];
    const drivesOf = own.flatMap((task) => outcomes[tasks.indexOf(task)] ?? []);
    table[setting] = { ...table[setting], [method]: accuracyOf(drivesOf) };
  }
  return { text: reportOf(table), json: { settings: table } };
};

const isSetting = (text: string): text is SettingName => (SETTING_NAMES as readonly string[]).includes(text);

function chosen<T extends string>(wanted: readonly string[], is: (text: string) => text is T, all: readonly T[], what: string): T[] {
  return wanted.map((text) => {
    if (!is(text)) throw new Error(`There is no ${what} ${text}. There are: ${all.join(', ')}.`);
    return text;
  });
}

function parts(setting: SettingName, method: Method, count: number): Task[] {
  const tasks: Task[] = [];
  for (let from = 1; from <= count; from += PART) tasks.push({ setting, method, from, to: Math.min(from + PART, count + 1) });
  return tasks;
}

/** A line on the terminal, where there is one. */
function progress(all: number): (done: number) => void {
  if (!process.stderr.isTTY) return () => undefined;
  return (done) => void process.stderr.write(`\r${Math.round((100 * done) / all)} %${done === all ? '\n' : ''}`);
}
