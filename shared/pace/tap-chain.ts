import type { CourseModel } from '#shared/pace/course-model.ts';
import { type JudgedTap, judgeTap, type TakenFor, tapQueue } from '#shared/pace/derive-tap.ts';
import type { Anchor, RunState, TapAct } from '#shared/pace/run-state.ts';

/**
 * All taps of a run, judged together. One tap alone cannot tell a wrong touch from a wrong distance or scale; the taps after it
 * can. So each is taken plainly first, and where one fits badly the most probable story is looked for: this or that tap was
 * mistaken, or distance or scale had jumped before it. A mistaken tap is doubted as soon as it stands out, and taken up again, or an
 * earlier one dropped, when a later tap says so.
 */
export interface TapChain {
  /** By the instant that counts. */
  readonly judged: readonly JudgedTap[];
  /** −2 ln of how probable all of it is. */
  readonly cost: number;
}

type Story = ReadonlyMap<number, TakenFor>;

/** A used tap beyond 3 sigmas starts the search. */
const STRAINED = 9;
/** So many taps may be out of the ordinary at once. */
const MOST_ROUNDS = 4;
/** A journal with more is not a hand's; it is judged plainly. */
const MOST_TAPS = 200;
const WAYS: readonly TakenFor[] = ['plain', 'rescale', 'jump', 'mistaken'];

/** The most probable story of all taps, found greedily; deterministic. `first`: the anchor at the start, null before it. */
export function likeliestChain(state: RunState, model: CourseModel, first: Anchor | null): TapChain {
  const queue = tapQueue(state);
  const follow = (story: Story): TapChain => followStory(state, model, first, queue, story);
  let story: Story = new Map();
  let best = follow(story);
  if (queue.length > MOST_TAPS || !best.judged.some((j) => j.strain !== null && j.strain > STRAINED)) return best;
  for (let round = 0; round < MOST_ROUNDS; round++) {
    const before = best.cost;
    for (const variant of variantsOf(story, best)) {
      const chain = follow(variant);
      if (chain.cost >= best.cost) continue;
      best = chain;
      story = variant;
    }
    if (best.cost === before) break;
  }
  return best;
}

/** Every story that differs in one tap. */
function variantsOf(story: Story, { judged }: TapChain): Story[] {
  return judged.flatMap(({ tap, strain }) => {
    if (strain === null) return [];
    const now = story.get(tap.seq) ?? 'plain';
    return WAYS.filter((way) => way !== now).map((way) => new Map(story).set(tap.seq, way));
  });
}

function followStory(state: RunState, model: CourseModel, first: Anchor | null, queue: readonly TapAct[], story: Story): TapChain {
  const anchors = first === null ? [] : [first];
  const judged: JudgedTap[] = [];
  const held = new Set<number>();
  let cost = 0;
  for (const tap of queue) {
    const one = judgeTap({ state, model, anchors, judged, held }, tap, story.get(tap.seq) ?? 'plain');
    judged.push(one);
    cost += one.cost;
    if (one.use === null) continue;
    anchors.push(one.use.anchor);
    held.add(one.use.place);
  }
  return { judged, cost };
}
