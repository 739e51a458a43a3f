import type { Method } from './methods.ts';
import type { SettingName } from './settings.ts';
import type { Accuracy } from './statistics.ts';

/** What the project has set itself, as ratios of the finish RMS to the ratio rule's in the same run, and as coverage. */

export type Table = Partial<Record<SettingName, Partial<Record<Method, Accuracy>>>>;

export interface Goal {
  readonly what: string;
  readonly value: number;
  readonly bound: string;
  readonly met: boolean;
}

const ESTIMATORS = ['filter', 'filterSpeed', 'filterPosition'] as const;
const BASE_AT_MOST = { filter: 0.7, filterSpeed: 0.52, filterPosition: 0.28 } as const;
const GROSS_AT_MOST = 0.03;
const COVERED = { least: 0.93, most: 0.98 };
/** Worlds of which the engine is told nothing: there the ranking must hold. */
const OTHER_MODELS: readonly SettingName[] = ['otherTyres', 'geometryOff', 'alikeTaps'];

export function goalsOf(table: Table): Goal[] {
  const goals: Goal[] = [];
  const ratioGoal = (setting: SettingName, method: Method, against: Method, atMost: number): void => {
    const [a, b] = [table[setting]?.[method], table[setting]?.[against]];
    if (a === undefined || b === undefined) return;
    const value = a.finishRmsMs / b.finishRmsMs;
    goals.push({ what: `${setting}: ${method} / ${against}`, value, bound: `≤ ${atMost}`, met: value <= atMost });
  };
  // the engine's own ratio rule judges all touches together and lets short legs add up, so the classic rule is run beside it
  for (const against of ['ratioPlain', 'ratio'] as const)
    for (const method of ESTIMATORS) ratioGoal('base', method, against, BASE_AT_MOST[method]);
  ratioGoal('gross', 'filter', 'ratioPlain', GROSS_AT_MOST);
  ratioGoal('gross', 'filter', 'ratio', GROSS_AT_MOST);
  for (const setting of Object.keys(table) as SettingName[]) {
    ratioGoal(setting, 'filterSpeed', 'filter', 1);
    ratioGoal(setting, 'filterPosition', 'filterSpeed', 1);
    for (const method of ESTIMATORS) {
      ratioGoal(setting, method, 'ratioPlain', 1);
      ratioGoal(setting, method, 'ratio', 1);
      if (OTHER_MODELS.includes(setting)) continue;
      const covered = table[setting]?.[method]?.within2Sigma;
      if (covered === undefined) continue;
      const met = covered >= COVERED.least && covered <= COVERED.most;
      goals.push({ what: `${setting}: ${method} within 2 sigma`, value: covered, bound: `${COVERED.least} to ${COVERED.most}`, met });
    }
  }
  return goals;
}
