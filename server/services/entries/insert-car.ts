import { cars } from '#server/db/schema/cars.ts';
import { wheelScales } from '#server/db/schema/wheel-scales.ts';
import { wheelSetups } from '#server/db/schema/wheel-setups.ts';
import type { ServiceContext } from '#server/services/context.ts';
import type { CarInPack } from '#shared/course/pack.ts';

export interface NewCar {
  readonly name: string;
  readonly dialReadsHighPercent: number;
  /** Left out where nobody has measured. */
  readonly behindNose?: CarInPack['behindNose'];
  readonly setup: Pick<typeof wheelSetups.$inferInsert, 'name' | 'tyre' | 'channel' | 'pulsesPerTurn' | 'driven' | 'secondChannel'>;
  /** Oldest first. */
  readonly scales: readonly {
    readonly mmPerPulse: number;
    readonly scaleSigma: number;
    readonly source: 'nominal' | 'measured distance';
    readonly note: string;
    readonly recordedAt: Date;
  }[];
}

/** A car with one wheel set-up and its scales. The caller has been let through already. */
export async function insertCar(
  ctx: ServiceContext,
  teamId: string,
  car: NewCar,
): Promise<{ readonly carId: string; readonly wheelSetupId: string }> {
  const { name, dialReadsHighPercent, behindNose } = car;
  const offsets = behindNose === undefined ? {} : { seatBehindNoseM: behindNose.seatM, aerialBehindNoseM: behindNose.aerialM };
  const [carRow] = await ctx.db
    .insert(cars)
    .values({ teamId, name, dialReadsHighPercent, ...offsets })
    .returning({ id: cars.id });
  if (!carRow) throw new Error('insert returned no row');
  const [setupRow] = await ctx.db
    .insert(wheelSetups)
    .values({ carId: carRow.id, ...car.setup })
    .returning({ id: wheelSetups.id });
  if (!setupRow) throw new Error('insert returned no row');
  await ctx.db.insert(wheelScales).values(car.scales.map((scale) => ({ wheelSetupId: setupRow.id, ...scale })));
  return { carId: carRow.id, wheelSetupId: setupRow.id };
}
