import { sha256Hex } from '#server/auth/tokens.ts';
import type { AttemptRow } from '#server/services/access/require-attempt.ts';
import type { ServiceContext } from '#server/services/context.ts';
import type { Fault } from '#shared/api/error-body.ts';
import { packSchema } from '#shared/api/pack.ts';
import { canonicalJson } from '#shared/canonical-json.ts';
import { checkRaceClass } from '#shared/course/check.ts';
import { printedMetres } from '#shared/course/convert.ts';
import type { Checkpoint, Zone } from '#shared/course/course-book.ts';
import type { CarInPack, Pack, WheelInPack } from '#shared/course/pack.ts';
import { fail, ok, type Result } from '#shared/result.ts';
import { raceClassOf } from './race-class-of.ts';
import { type PackRows, readPackRows } from './read-pack-rows.ts';

export interface BuiltPack {
  readonly pack: Pack;
  readonly canonical: string;
  readonly digest: string;
}

export interface PackFault {
  readonly message: string;
  readonly faults: readonly Fault[];
}

/** The pack of an attempt as the rows stand now. The same rows give the same bytes, so the same digest. */
export async function buildPack(ctx: ServiceContext, attempt: AttemptRow): Promise<Result<BuiltPack, PackFault>> {
  return packOf(await readPackRows(ctx, attempt));
}

function packOf(rows: PackRows): Result<BuiltPack, PackFault> {
  const { scale } = rows;
  if (scale === null) {
    return fail({ message: `The wheel set-up "${rows.setup.name}" has no wheel scale yet. Give it one in the garage.`, faults: [] });
  }
  const pack = assemble({ ...rows, scale });
  const faults = faultsOf(pack);
  const [first] = faults;
  if (first) return fail({ message: `${first.where}: ${first.message}`, faults });
  const canonical = canonicalJson(pack);
  return ok({ pack, canonical, digest: sha256Hex(canonical) });
}

function assemble(rows: PackRows & { readonly scale: NonNullable<PackRows['scale']> }): Pack {
  const { event, team, entry, attempt, car, setup, scale } = rows;
  return {
    format: 1,
    event: { id: event.id, name: event.name, place: event.place, timeZone: event.timeZone, rules: event.rules },
    team: { id: team.id, name: team.name },
    entry: { id: entry.id, number: entry.number, crew: rows.crew },
    attempt: {
      id: attempt.id,
      number: attempt.number,
      releaseMs: attempt.releaseAt?.getTime() ?? null,
      stagedBehindM: attempt.stagedBehindM,
    },
    courseBook: rows.courseBook,
    raceClass: raceClassOf(rows.raceClass),
    ownCheckpoints: rows.places.map(ownCheckpointOf).sort((a, b) => printedMetres(a.at) - printedMetres(b.at)),
    crewZones: rows.zones.map(crewZoneOf).sort((a, b) => printedMetres(a.from) - printedMetres(b.from)),
    car: carInPack(car),
    wheel: wheelInPack(setup, scale),
    plan: entry.planSettings,
    settings: entry.cockpitSettings,
  };
}

/** What nobody has measured is left out, so that an old row gives the pack it always gave. */
function carInPack({ id, name, dialReadsHighPercent, seatBehindNoseM: seatM, aerialBehindNoseM: aerialM }: PackRows['car']): CarInPack {
  return { id, name, dialReadsHighPercent, ...(seatM === null || aerialM === null ? {} : { behindNose: { seatM, aerialM } }) };
}

function wheelInPack(setup: PackRows['setup'], scale: NonNullable<PackRows['scale']>): WheelInPack {
  return {
    setupId: setup.id,
    setupName: setup.name,
    channel: setup.channel,
    pulsesPerTurn: setup.pulsesPerTurn,
    mmPerPulse: scale.mmPerPulse,
    scaleSigma: scale.scaleSigma,
    scaleSource: scale.source,
    ...(setup.driven ? { driven: true } : {}),
    ...(setup.secondChannel === null ? {} : { secondChannel: setup.secondChannel }),
  };
}

function ownCheckpointOf(row: PackRows['places'][number]): Checkpoint {
  const position = row.lat === null || row.lon === null ? null : { lat: row.lat, lon: row.lon };
  const at = { text: row.atText, unit: row.atUnit };
  return { id: row.placeId, name: row.name, duty: row.duty, at, source: 'own', side: row.side, note: row.note, position };
}

function crewZoneOf(row: PackRows['zones'][number]): Zone {
  return {
    id: row.placeId,
    name: row.name,
    from: { text: row.fromText, unit: row.unit },
    to: { text: row.toText, unit: row.unit },
    limit: { text: row.limitText, unit: row.limitUnit },
    source: 'crew',
  };
}

/** What must be mended before a car can be sent off with this pack. */
function faultsOf(pack: Pack): Fault[] {
  const shape = packSchema.safeParse(pack);
  if (!shape.success) {
    return shape.error.issues.map((issue) => ({ code: 'SHAPE', where: issue.path.join('.'), message: issue.message }));
  }
  const classFaults = checkRaceClass(pack.courseBook, pack.raceClass).filter((fault) => fault.severity === 'error');
  const ids = new Set(pack.courseBook.checkpoints.map((checkpoint) => checkpoint.id));
  const clashes = pack.ownCheckpoints.filter((checkpoint) => ids.has(checkpoint.id));
  return [
    ...classFaults.map(({ code, where, message }) => ({ code, where: `raceClass.${where}`, message })),
    ...clashes.map(({ id }) => ({
      code: 'DUPLICATE_ID',
      where: 'ownCheckpoints',
      message: `"${id}" is an official checkpoint too. Give your own another id.`,
    })),
  ];
}
