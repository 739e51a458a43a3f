import { sql } from 'drizzle-orm';
import { check, doublePrecision, pgTable, text, unique, uuid } from 'drizzle-orm/pg-core';
import { createdAt, id } from './columns.ts';
import { teams } from './teams.ts';

export const cars = pgTable(
  'cars',
  {
    id: id(),
    teamId: uuid('team_id')
      .notNull()
      .references(() => teams.id, { onDelete: 'cascade' }),
    name: text('name').notNull(),
    /** How much the car's own dial reads high, percent. */
    dialReadsHighPercent: doublePrecision('dial_reads_high_percent').notNull().default(0),
    /** Metres behind the nose, both or neither: the navigator's sight line and the GNSS aerial. Null where nobody has measured. */
    seatBehindNoseM: doublePrecision('seat_behind_nose_m'),
    aerialBehindNoseM: doublePrecision('aerial_behind_nose_m'),
    createdAt: createdAt(),
  },
  (t) => [
    // A team tells its cars apart by name; also lists the cars of a team.
    unique('cars_team_id_name_key').on(t.teamId, t.name),
    // Lets an entry's foreign key demand that its car is the team's own.
    unique('cars_id_team_id_key').on(t.id, t.teamId),
    check('cars_dial_believable', sql`${t.dialReadsHighPercent} between -20 and 20`),
    check('cars_seat_in_car', sql`${t.seatBehindNoseM} between 0 and 20`),
    check('cars_aerial_on_car', sql`${t.aerialBehindNoseM} between 0 and 20`),
    check('cars_offsets_together', sql`(${t.seatBehindNoseM} is null) = (${t.aerialBehindNoseM} is null)`),
  ],
);
