import type { Pack } from '#shared/course/pack.ts';
import type { Aids } from '#shared/course/race-class.ts';

/** What is compared. `ratioPlain` and `limit` are the bench's own: the classic rule with no judging of taps, and a bound. */
export const METHODS = ['none', 'place', 'ratio', 'gain', 'filter', 'filterSpeed', 'filterPosition', 'limit', 'ratioPlain'] as const;
export type Method = (typeof METHODS)[number];

export const isMethod = (text: string): text is Method => (METHODS as readonly string[]).includes(text);

/** By the engine: its rule, and the aids that the class permits. */
export type EngineMethod = Exclude<Method, 'limit' | 'ratioPlain'>;

const RULES: Readonly<Record<EngineMethod, Pack['settings']['scaleRule']>> = {
  none: 'place only',
  place: 'place only',
  ratio: 'ratio',
  gain: 'gain',
  filter: 'estimator',
  filterSpeed: 'estimator',
  filterPosition: 'estimator',
};

const aidsOf = (method: Method): Aids => ({
  wheel: true,
  gnssSpeed: method === 'filterSpeed' || method === 'filterPosition',
  gnssPosition: method === 'filterPosition',
  dataLink: false,
});

export const usesGnss = (method: Method): boolean => aidsOf(method).gnssSpeed;

/** The pack as a team with that method would carry it. */
export const packFor = (pack: Pack, method: Method): Pack => ({
  ...pack,
  raceClass: { ...pack.raceClass, aids: aidsOf(method) },
  settings: { ...pack.settings, scaleRule: method === 'limit' || method === 'ratioPlain' ? 'ratio' : RULES[method] },
});
