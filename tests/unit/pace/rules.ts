import type { SurveyedPoint } from '#shared/course/course-book.ts';
import type { CockpitSettings, Pack } from '#shared/course/pack.ts';
import type { EventRules } from '#shared/course/race-class.ts';
import { pack, withSettings } from '#tests/unit/pace/packs.ts';

/** Every way a crew may have the engine work. */

export const SCALE_RULES: readonly CockpitSettings['scaleRule'][] = ['estimator', 'gain', 'ratio', 'place only'];
export const TIME_STARTS: readonly EventRules['timeStart'][] = ['scheduled', 'beam', 'flag'];

export const byRule = (scaleRule: CockpitSettings['scaleRule']): Pack => withSettings(pack, { scaleRule });
export const startedBy = (p: Pack, timeStart: EventRules['timeStart']): Pack => ({
  ...p,
  event: { ...p.event, rules: { ...p.event.rules, timeStart } },
});

/** Due north, some kilometres a point. */
const line: SurveyedPoint[] = [-200, 0, 10_000, 20_000, 30_000, 31_400].map((d) => ({ lat: 50 + d / 111_229, lon: 5, d }));

/** The same pack with everything that may be left out. */
export const fullyFitted = (p: Pack): Pack => ({
  ...p,
  courseBook: { ...p.courseBook, geometry: line },
  car: { ...p.car, behindNose: { seatM: 2.1, aerialM: 1.8 } },
  wheel: { ...p.wheel, driven: true, secondChannel: 1 },
  plan: { ...p.plan, reserveS: 1.5 },
  settings: { ...p.settings, tapLeadMs: { glass: 80, wired: -30 }, tapLeadSigmaMs: { glass: 60, wired: 90 } },
});
