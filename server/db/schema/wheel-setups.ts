import { sql } from 'drizzle-orm';
import { boolean, check, integer, pgTable, text, unique, uuid } from 'drizzle-orm/pg-core';
import { cars } from './cars.ts';
import { createdAt, id } from './columns.ts';

/** A set of tyres on a car with the sensor that counts its turns. */
export const wheelSetups = pgTable(
  'wheel_setups',
  {
    id: id(),
    carId: uuid('car_id')
      .notNull()
      .references(() => cars.id, { onDelete: 'cascade' }),
    name: text('name').notNull(),
    tyre: text('tyre').notNull(),
    /** Wheel channel of the pulse sentences that measures distance. */
    channel: integer('channel').notNull(),
    pulsesPerTurn: integer('pulses_per_turn').notNull(),
    /** The engine drives the measured wheel. */
    driven: boolean('driven').notNull().default(false),
    /** Channel of another wheel to compare with; null where only one is counted. */
    secondChannel: integer('second_channel'),
    createdAt: createdAt(),
  },
  (t) => [
    // A car's set-ups are told apart by name; also lists the set-ups of a car.
    unique('wheel_setups_car_id_name_key').on(t.carId, t.name),
    // Lets an entry's foreign key demand that its set-up belongs to its car.
    unique('wheel_setups_id_car_id_key').on(t.id, t.carId),
    check('wheel_setups_channel_range', sql`${t.channel} between 0 and 15`),
    check('wheel_setups_pulses_range', sql`${t.pulsesPerTurn} between 1 and 100000`),
    check('wheel_setups_second_channel_range', sql`${t.secondChannel} between 0 and 15`),
    check('wheel_setups_second_channel_other', sql`${t.secondChannel} <> ${t.channel}`),
  ],
);
