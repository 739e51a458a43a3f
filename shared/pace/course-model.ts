import { printedFineness, readPrintedMetres, readPrintedSpeed } from '#shared/course/convert.ts';
import type { Checkpoint, PrintedDistance, PrintedSpeed, Zone } from '#shared/course/course-book.ts';
import type { Pack } from '#shared/course/pack.ts';
import { makePlan, type Plan, type PlanRequest } from '#shared/pace/plan.ts';
import { type LivePlanner, makeLivePlanner } from '#shared/pace/plan-live.ts';
import { planPieces, reserveWaypoints } from '#shared/pace/plan-pieces.ts';
import { surveySigma } from '#shared/pace/scale.ts';
import { makeSchedule, type Schedule } from '#shared/pace/schedule.ts';

/** The course as it is run now: the pack with everything that was typed in on the grid, in SI. Rebuilt when that changes. */

/** What the officials changed after the pack was made. Plain data, part of the state. */
export interface Changes {
  /** Counts up with every change, so that what was built from them is rebuilt. */
  version: number;
  releaseMs: number | null;
  targetTimeMs: number;
  stagedBehindM: number;
  limits: { readonly id: string; readonly from: PrintedDistance; readonly to: PrintedDistance; readonly limit: PrintedSpeed }[];
  lines: Record<string, PrintedDistance>;
}

/** A checkpoint to be touched or passed; the start is none. */
export interface Place {
  readonly checkpoint: Checkpoint;
  readonly d: number;
  readonly surveySigma: number;
}

export interface ZoneStretch {
  readonly id: string;
  readonly name: string;
  readonly from: number;
  readonly to: number;
  readonly limit: number;
}

export interface CourseModel {
  readonly version: number;
  readonly start: number;
  readonly finish: number;
  readonly startSigma: number;
  readonly places: readonly Place[];
  readonly finishIndex: number;
  readonly zones: readonly ZoneStretch[];
  readonly schedule: Schedule;
  readonly cap: number | null;
  /** Cap less its margin. */
  readonly top: number | null;
  readonly floor: number | null;
  readonly plan: Plan;
  readonly request: Omit<PlanRequest, 'from'>;
  /** Plans from any state of the run; holds the whole course cut at every limit, from the place on the grid. */
  readonly live: LivePlanner;
}

export const makeChanges = (pack: Pack): Changes => ({
  version: 0,
  releaseMs: pack.attempt.releaseMs,
  targetTimeMs: pack.raceClass.targetTimeMs,
  stagedBehindM: pack.attempt.stagedBehindM,
  limits: [],
  lines: {},
});

/** @throws RangeError where pack and changes make no course. */
export function buildCourseModel(pack: Pack, changes: Changes): CourseModel {
  const placed = [...pack.courseBook.checkpoints, ...pack.ownCheckpoints].map((c) => placeOf(c, changes.lines));
  const startPlace = placed.find((p) => p.checkpoint.duty === 'start');
  const finishPlace = placed.find((p) => p.checkpoint.duty === 'finish');
  if (startPlace === undefined || finishPlace === undefined) throw new RangeError('the course book has no start or no finish');
  const schedule = makeSchedule(pack.courseBook, pack.raceClass, {
    targetTimeMs: changes.targetTimeMs,
    start: startPlace.d,
    finish: finishPlace.d,
  });
  const places = placed.filter((p) => p.checkpoint.duty !== 'start').sort((a, b) => a.d - b.d);
  const { raceClass, plan } = pack;
  const cap = raceClass.cap === null ? null : readPrintedSpeed(raceClass.cap);
  const floor = raceClass.floor === null ? null : readPrintedSpeed(raceClass.floor);
  const top = cap === null ? null : cap * (1 - plan.capMargin);
  const zones = buildZones(pack, changes);
  const mode = schedule.sections.length > 1 ? 'sections' : 'finish';
  const via = reserveWaypoints(schedule, plan.reserveS ?? 0);
  const { acceleration, deceleration } = plan;
  const request = { schedule, zones, top, floor, acceleration, deceleration, mode, via } as const;
  const from = planStart(pack, changes, startPlace.d);
  const pieces = planPieces({ ...request, from: { ...from, x: Math.min(from.x, startPlace.d - Math.max(0, changes.stagedBehindM)) } });
  return {
    version: changes.version,
    start: startPlace.d,
    finish: finishPlace.d,
    startSigma: startPlace.surveySigma,
    places,
    finishIndex: places.indexOf(finishPlace),
    zones,
    schedule,
    cap,
    top,
    floor,
    plan: makePlan({ ...request, from }, pieces),
    request,
    live: makeLivePlanner(request, pieces),
  };
}

function placeOf(checkpoint: Checkpoint, lines: Changes['lines']): Place {
  const printed = lines[checkpoint.id] ?? checkpoint.at;
  const d = readPrintedMetres(printed);
  if (d === null) throw new RangeError(`"${checkpoint.name}" has no readable distance`);
  return { checkpoint, d, surveySigma: surveySigma(printedFineness(printed)) };
}

/**
 * From the scheduled second or the flag the time runs while the nose still stands behind the line; at a beam it begins at the
 * line, where the car already rolls.
 */
function planStart(pack: Pack, { stagedBehindM }: Changes, start: number): PlanRequest['from'] {
  const behind = Math.max(0, stagedBehindM);
  if (pack.event.rules.timeStart !== 'beam') return { x: start - behind, v: 0, t: 0 };
  return { x: start, v: Math.sqrt(2 * pack.plan.acceleration * behind), t: 0 };
}

function buildZones(pack: Pack, changes: Changes): ZoneStretch[] {
  const zones = new Map<string, ZoneStretch>();
  const put = (id: string, name: string, z: Pick<Zone, 'from' | 'to' | 'limit'>): void => {
    const [from, to, limit] = [readPrintedMetres(z.from), readPrintedMetres(z.to), readPrintedSpeed(z.limit)];
    if (from === null || to === null || limit === null || !(from < to) || !(limit > 0)) return;
    zones.set(id, { id, name, from, to, limit });
  };
  for (const z of [...pack.courseBook.zones, ...pack.crewZones]) put(z.id, z.name, z);
  for (const z of changes.limits) put(z.id, zones.get(z.id)?.name ?? '', z);
  return [...zones.values()].sort((a, b) => a.from - b.from);
}

/** The zone that holds x with the lowest limit, or null. */
export function zoneAt(model: CourseModel, x: number): ZoneStretch | null {
  let found: ZoneStretch | null = null;
  for (const zone of model.zones) if (x >= zone.from && x < zone.to && (found === null || zone.limit < found.limit)) found = zone;
  return found;
}
