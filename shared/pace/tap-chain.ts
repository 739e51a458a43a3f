import type { Estimate, Temper } from '#shared/pace/belief.ts';
import type { CourseModel } from '#shared/pace/course-model.ts';
import { type JudgedTap, judgeTap, tapQueue } from '#shared/pace/derive-tap.ts';
import { estimatesTo, firstNodeAfter } from '#shared/pace/estimate-nodes.ts';
import type { Anchor, RunState, TapAct } from '#shared/pace/run-state.ts';
import type { Story, TakenFor } from '#shared/pace/tap-judge.ts';
import { temperBy } from '#shared/pace/temper.ts';

/**
 * All taps of a run, judged together. One tap alone cannot tell a wrong touch from a wrong distance or scale; the taps after it
 * can. So each is taken plainly first, and where one fits badly the most probable story is looked for: this or that tap was
 * mistaken, or distance or scale had jumped before it. A mistaken tap is doubted as soon as it stands out, and taken up again, or an
 * earlier one dropped, when a later tap says so. Between taps the estimator compares with GNSS.
 */
export interface TapChain {
  /** Taps, by the instant that counts, and comparisons, in the order in which they count. */
  readonly steps: readonly ChainStep[];
  /** −2 ln of how probable all of it is. */
  readonly cost: number;
}

export type ChainStep = { readonly kind: 'tap'; readonly judged: JudgedTap } | { readonly kind: 'node'; readonly anchor: Anchor };

/** A used tap beyond 3 sigmas starts the search. */
const STRAINED = 9;
/** So many taps may be out of the ordinary at once. */
const MOST_ROUNDS = 4;
/** A journal with more is not a hand's; it is judged plainly. */
const MOST_TAPS = 200;
const WAYS: readonly TakenFor[] = ['plain', 'rescale', 'jump', 'mistaken'];

interface Course {
  readonly state: RunState;
  readonly model: CourseModel;
  /** The anchor at the start; null before it. */
  readonly first: Anchor | null;
  readonly queue: readonly TapAct[];
}

/** Most derivations ask for the taps just judged, with perhaps a comparison more. A pure function's last answer; never stored. */
const answered = new WeakMap<RunState, { readonly key: string; readonly chain: TapChain }>();

/** The most probable story of all taps, found greedily; deterministic. `first`: the anchor at the start, null before it. */
export function likeliestChain(state: RunState, model: CourseModel, first: Anchor | null): TapChain {
  const all = tapQueue(state);
  const course: Course = { state, model, first, queue: all.filter((tap) => tap.raw !== null) };
  const key = keyOf(course);
  const known = answered.get(state);
  const chain = known?.key === key ? goOn(course, known.chain) : judgeAll(course);
  answered.set(state, { key, chain });
  const waiting = all.filter((tap) => tap.raw === null);
  return waiting.length === 0 ? chain : goOn(course, chain, waiting);
}

/** Everything that the judgement of the taps depends on. */
function keyOf({ state: { acts, odometer }, model, first, queue }: Course): string {
  const last = queue[queue.length - 1];
  return JSON.stringify([
    queue.map(({ seq, t, raw }) => [seq, t, raw]),
    [acts.voided, acts.moved, acts.accepted, acts.skipped],
    [model.version, odometer.handedBack?.at, odometer.losses.length, firstNodeAfter(odometer.sourceNodes, last?.t ?? 0)],
    [first?.at, first?.d, first?.w, first?.g],
  ]);
}

function judgeAll(course: Course): TapChain {
  const { first } = course;
  const { story, chain } = likeliestStory(course);
  const used = tapsOf(chain).flatMap((j) => (j.use === null ? [] : [j.tap]));
  if (first === null || first.belief === null || used.length === 0) return goOn(course, chain);
  // by the taps that are used alone: one that is not believed must not shift so much as a rounding
  const temper = temperBy(
    course.state.pack.raceClass.aids.gnssSpeed,
    (tried) => follow(tempered({ ...course, queue: used }, tried), story).cost,
  );
  const mild = tempered(course, temper);
  return goOn(mild, follow(mild, story));
}

/** The same taps, the comparisons with GNSS since, and taps whose raw values have yet to come. */
function goOn(course: Course, { steps }: TapChain, waiting: readonly TapAct[] = []): TapChain {
  const walk = new ChainWalk(course);
  for (const step of steps) walk.add(step);
  walk.compareTo(Number.POSITIVE_INFINITY);
  for (const tap of waiting) walk.judge(tap, 'plain');
  return walk;
}

function tempered(course: Course, temper: Temper): Course {
  const { first } = course;
  return first === null || first.belief === null ? course : { ...course, first: { ...first, belief: { ...first.belief, temper } } };
}

function likeliestStory(course: Course): { story: Story; chain: TapChain } {
  let story: Story = new Map();
  let best = follow(course, story);
  if (course.queue.length > MOST_TAPS || !tapsOf(best).some((j) => j.strain !== null && j.strain > STRAINED)) return { story, chain: best };
  for (let round = 0; round < MOST_ROUNDS; round++) {
    const before = best;
    for (const { variant, from } of variantsOf(story, before)) {
      const chain = follow(course, variant, before, from);
      if (chain.cost >= best.cost) continue;
      best = chain;
      story = variant;
    }
    if (best === before) break;
  }
  return { story, chain: best };
}

const tapsOf = ({ steps }: TapChain): JudgedTap[] => steps.flatMap((s) => (s.kind === 'tap' ? [s.judged] : []));

/** Every story that differs in one tap, and the tap (by number in the queue) from which on it differs. */
function variantsOf(story: Story, chain: TapChain): { variant: Story; from: number }[] {
  return tapsOf(chain).flatMap(({ tap, strain }, from) => {
    if (strain === null) return [];
    const now = story.get(tap.seq) ?? 'plain';
    return WAYS.filter((way) => way !== now).map((way) => ({ variant: new Map(story).set(tap.seq, way), from }));
  });
}

/** Follows a story up to the last tap; the taps before number `from` are taken from a chain that judged them alike. */
function follow(course: Course, story: Story, known: TapChain | null = null, from = 0): TapChain {
  const walk = new ChainWalk(course);
  let told = 0;
  for (const step of known?.steps ?? []) {
    if (told === from) break;
    walk.add(step);
    if (step.kind === 'tap') told++;
  }
  for (let i = told; i < course.queue.length; i++) {
    const tap = course.queue[i] as TapAct;
    walk.compareTo(tap.t);
    walk.judge(tap, story.get(tap.seq) ?? 'plain');
  }
  return walk;
}

class ChainWalk implements TapChain {
  readonly steps: ChainStep[] = [];
  cost = 0;
  private readonly anchors: Anchor[];
  private readonly judged: JudgedTap[] = [];
  private readonly held = new Set<number>();
  private placedAt: number;

  constructor(private readonly course: Course) {
    this.anchors = course.first === null ? [] : [course.first];
    this.placedAt = course.first?.at ?? 0;
  }

  judge(tap: TapAct, takenFor: TakenFor): void {
    const { state, model } = this.course;
    this.add({
      kind: 'tap',
      judged: judgeTap({ state, model, anchors: this.anchors, judged: this.judged, held: this.held }, tap, takenFor),
    });
  }

  add(step: ChainStep): void {
    this.steps.push(step);
    if (step.kind === 'node') {
      this.anchors.push(step.anchor);
      return;
    }
    const { judged } = step;
    this.judged.push(judged);
    this.cost += judged.cost;
    if (judged.use === null) return;
    this.anchors.push(judged.use.anchor);
    this.held.add(judged.use.place);
    this.placedAt = judged.use.anchor.at;
  }

  compareTo(until: number): void {
    const last = this.anchors[this.anchors.length - 1];
    if (last === undefined || last.belief === null) return;
    for (const anchor of estimatesTo(this.course.state, last as Estimate, this.placedAt, until)) this.add({ kind: 'node', anchor });
  }
}
