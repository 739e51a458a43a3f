import type { PlanRequest } from '#shared/pace/plan.ts';
import { atBeginning, makeEvaluation, type Piece, solve } from '#shared/pace/plan-solver.ts';
import { type Schedule, type ScheduleSection, targetTimeAt } from '#shared/pace/schedule.ts';

/** The course cut into pieces under one limit each: what the planner's arithmetic works on. */

/** A stretch with a highest speed, already in SI. */
export interface LimitedStretch {
  readonly from: number;
  readonly to: number;
  readonly limit: number;
}

/** A place where the plan shall stand at a time error of its own: positive = late, negative = in hand. */
export interface Waypoint {
  readonly x: number;
  readonly error: number;
}

/** Without a class cap the solver still needs an end of the scale; no road car passes it. */
export const TOP_WITHOUT_CAP = 120;

/** Cuts [from.x, finish] at the edges of zones and sections and at waypoints. Overlapping zones: the lowest limit holds. */
export function planPieces(request: PlanRequest): readonly Piece[] {
  const { schedule, from, via } = request;
  const edges = edgesOf(request);
  const pieces: Piece[] = [];
  for (let i = 1; i < edges.length; i++) {
    const [begin, stop] = [edges[i - 1] as number, edges[i] as number];
    const middle = (begin + stop) / 2;
    const section = sectionUnder(schedule, middle);
    const weight = request.mode === 'finish' ? 1 : section.speed;
    // a class's lowest speed means its averages
    const floor = section.neutral ? 0 : (request.floor ?? 0);
    pieces.push({ from: begin, to: stop, top: topAt(request, middle), weight, floor });
  }
  const ahead = (via ?? []).filter(({ x }) => x > from.x && x < schedule.finish);
  return ahead.length === 0 ? pieces : weighedThrough(request, pieces, ahead);
}

function edgesOf({ schedule, zones, from, mode, via }: PlanRequest): number[] {
  const cuts = new Set<number>([from.x, schedule.finish]);
  const add = (x: number): void => {
    if (x > from.x && x < schedule.finish) cuts.add(x);
  };
  for (const zone of zones) {
    add(zone.from);
    add(zone.to);
  }
  const { sections } = schedule;
  sections.forEach((section, i) => {
    if (mode === 'sections' || section.neutral || sections[i - 1]?.neutral === true) add(section.from);
  });
  for (const { x } of via ?? []) add(x);
  return from.x < schedule.finish ? [...cuts].sort((a, b) => a - b) : [];
}

function sectionUnder({ sections }: Schedule, x: number): ScheduleSection {
  let found = sections[0] as ScheduleSection;
  for (const section of sections) if (x > section.from) found = section;
  return found;
}

function topAt({ zones, top }: PlanRequest, x: number): number {
  let limit = top ?? TOP_WITHOUT_CAP;
  for (const zone of zones) if (x > zone.from && x < zone.to) limit = Math.min(limit, zone.limit);
  return limit;
}

/**
 * Weights such that one common ratio passes through every waypoint, or as near as the car can: each part between two is solved by
 * itself and its answer becomes its weight. Solved as a whole the ratio is then 1, and a debt later on is spread over all parts.
 */
function weighedThrough(request: PlanRequest, pieces: readonly Piece[], via: readonly Waypoint[]): readonly Piece[] {
  const { schedule } = request;
  let { v, t } = request.from;
  let begin = 0;
  const weighed: Piece[] = [];
  for (const { x, error } of [...via, { x: schedule.finish as number, error: 0 }].sort((a, b) => a.x - b.x)) {
    const part = pieces.slice(begin).filter((piece) => piece.to <= x);
    if (part.length === 0) continue;
    const evaluation = makeEvaluation(part.length);
    const { s } = solve(part, request, atBeginning(part, v), targetTimeAt(schedule, x) + error - t, evaluation);
    weighed.push(...part.map((piece) => ({ ...piece, weight: piece.weight * s })));
    t += evaluation.time;
    v = evaluation.nodes[part.length] as number;
    begin += part.length;
  }
  return weighed;
}

/** A reserve is there after the first quarter of the course and is spent in its last tenth. Common practice, no source. */
const RESERVE_FROM = 0.25;
const RESERVE_UNTIL = 0.9;

/** Waypoints of a plan that keeps so many seconds in hand; none for 0. */
export function reserveWaypoints({ start, finish }: Schedule, reserveS: number): readonly Waypoint[] {
  if (!(reserveS > 0)) return [];
  return [RESERVE_FROM, RESERVE_UNTIL].map((share) => ({ x: start + share * (finish - start), error: -reserveS }));
}

/** Waypoints of a plan that leaves every zone on zero: for a course that is scored anywhere. */
export const zoneWaypoints = (zones: readonly LimitedStretch[]): readonly Waypoint[] => zones.map(({ to }) => ({ x: to, error: 0 }));
