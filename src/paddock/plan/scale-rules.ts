import type { CockpitSettings } from '#shared/course/pack.ts';
import type { Choice } from '#src/paddock/parts/choice-cards.tsx';

type ScaleRule = CockpitSettings['scaleRule'];

/** What a touch does to the distance and the wheel scale, in a crew's words; the best first. */
export const SCALE_RULES: readonly (Choice & { readonly value: ScaleRule })[] = [
  {
    value: 'estimator',
    name: 'estimator, recommended',
    words: 'All touches are judged together for distance, scale, warming tyres and your lead, with GNSS where the class permits it.',
  },
  {
    value: 'gain',
    name: 'gain ratio',
    words: 'A touch sets the distance and moves the scale part of the way, further after a long leg than after a short one.',
  },
  {
    value: 'ratio',
    name: 'ratio',
    words: 'A touch sets the distance and makes the scale official over measured distance; a leg too short to trust leaves it alone.',
  },
  {
    value: 'place only',
    name: 'place only',
    words: 'A touch sets the distance; the scale stays what the garage says.',
  },
];
