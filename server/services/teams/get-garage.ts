import { asc, desc, eq } from 'drizzle-orm';
import { cars } from '#server/db/schema/cars.ts';
import { wheelScales } from '#server/db/schema/wheel-scales.ts';
import { wheelSetups } from '#server/db/schema/wheel-setups.ts';
import { requireTeam } from '#server/services/access/require-team.ts';
import type { ServiceContext } from '#server/services/context.ts';
import type { GarageResponse } from '#shared/api/teams.ts';

export async function getGarage(ctx: ServiceContext, teamId: string): Promise<GarageResponse> {
  await requireTeam(ctx, teamId, 'garage.read');
  const carRows = await ctx.db.select().from(cars).where(eq(cars.teamId, teamId)).orderBy(asc(cars.name));
  const setupRows = await ctx.db
    .select({ setup: wheelSetups })
    .from(wheelSetups)
    .innerJoin(cars, eq(cars.id, wheelSetups.carId))
    .where(eq(cars.teamId, teamId))
    .orderBy(asc(wheelSetups.name));
  const scaleRows = await ctx.db
    .select({ scale: wheelScales })
    .from(wheelScales)
    .innerJoin(wheelSetups, eq(wheelSetups.id, wheelScales.wheelSetupId))
    .innerJoin(cars, eq(cars.id, wheelSetups.carId))
    .where(eq(cars.teamId, teamId))
    .orderBy(desc(wheelScales.recordedAt));

  const scalesOf = (setupId: string) =>
    scaleRows
      .filter(({ scale }) => scale.wheelSetupId === setupId)
      .map(({ scale }) => ({
        id: scale.id,
        mmPerPulse: scale.mmPerPulse,
        scaleSigma: scale.scaleSigma,
        source: scale.source,
        runId: scale.runId,
        note: scale.note,
        recordedMs: scale.recordedAt.getTime(),
      }));
  const setupsOf = (carId: string) =>
    setupRows
      .filter(({ setup }) => setup.carId === carId)
      .map(({ setup: { id, name, tyre, channel, pulsesPerTurn, driven, secondChannel } }) => ({
        id,
        name,
        tyre,
        channel,
        pulsesPerTurn,
        driven,
        secondChannel,
        scales: scalesOf(id),
      }));
  return {
    cars: carRows.map(({ id, name, dialReadsHighPercent, seatBehindNoseM: seatM, aerialBehindNoseM: aerialM }) => ({
      id,
      name,
      dialReadsHighPercent,
      behindNose: seatM === null || aerialM === null ? null : { seatM, aerialM },
      wheelSetups: setupsOf(id),
    })),
  };
}
