import { cp, mkdtemp, readdir, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join, relative } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { migrate } from '#server/db/migrate.ts';
import { runCommand } from '#server/postgres/run-command.mjs';
import { createTestDatabase } from '#tests/setup/database.ts';
import { type House, openHouse } from './support/house.ts';
import { newManager, newMember, type Person } from './support/people.ts';
import { type Loaded, loadPractice } from './support/tablet.ts';

let house: House;
let person: Person;
let loaded: Loaded;
beforeAll(async () => {
  house = await openHouse();
  person = await newManager(house);
  loaded = await loadPractice(person);
});
afterAll(() => house.close());

const query = (text: string, values: unknown[] = []) => house.connection.pool.query(text, values);

describe('migrations', () => {
  it('make exactly the schema that the code describes', { timeout: 60_000 }, async () => {
    const folder = await mkdtemp(join(tmpdir(), 'evenline-drizzle-'));
    try {
      await cp('drizzle', folder, { recursive: true });
      const before = await readdir(folder);
      const args = [
        'node_modules/drizzle-kit/bin.cjs',
        'generate',
        '--dialect',
        'postgresql',
        '--schema',
        './server/db/schema/*.ts',
        '--out',
        relative(process.cwd(), folder),
      ];
      const { code, output } = await runCommand(process.execPath, [...args, '--casing', 'snake_case']);
      expect([code, output]).toEqual([0, expect.stringContaining('No schema changes')]);
      expect(await readdir(folder)).toEqual(before);
    } finally {
      await rm(folder, { recursive: true });
    }
  });

  it('may be started by several at once and again', async () => {
    const database = await createTestDatabase();
    try {
      await Promise.all([1, 2, 3].map(() => migrate(database.url)));
    } finally {
      await database.drop();
    }
  });
});

describe('the database itself refuses', () => {
  it.each([
    ['an entry with another team’s car', 'entries_own_car', 'update entries set car_id = $2 where id = $1', 'otherCar'],
    ['an entry in a class of another event', 'entries_class_of_event', 'update entries set race_class_id = $2 where id = $1', 'otherClass'],
    [
      'a crew of people who are not in the team',
      'entry_crew_member',
      "insert into entry_crew (entry_id, team_id, user_id, role) select id, team_id, $2, 'crew' from entries where id = $1",
      'otherUser',
    ],
    [
      'a second driver in one car',
      'entry_crew_seat_key',
      "insert into entry_crew (entry_id, team_id, user_id, role) select id, team_id, $2, 'navigator' from entries where id = $1",
      'secondUser',
    ],
    [
      'a course book version that is not there',
      'attempts_course_book_version',
      'update attempts set course_book_version = 99 where entry_id = $1 and $2::text is not null',
      'otherCar',
    ],
    [
      'a second attempt of one number',
      'attempts_entry_id_number_key',
      'insert into attempts (entry_id, number, course_book_id, course_book_version) select entry_id, number, course_book_id, course_book_version from attempts where entry_id = $1 and $2::text is not null',
      'otherCar',
    ],
  ])('%s', async (_what, constraint, text, other) => {
    const stranger = await newManager(house);
    const theirs = await loadPractice(stranger);
    const second = await newMember(house, person.teamId, 'navigator');
    const ids: Record<string, string> = {
      otherCar: theirs.pack.car.id,
      otherClass: theirs.pack.raceClass.id,
      otherUser: stranger.userId,
      secondUser: second.userId,
    };
    await expect(query(text, [loaded.entryId, ids[other]])).rejects.toMatchObject({ constraint });
  });

  it.each([
    ['users_email_lower_case', "insert into users (email, name, password_hash) values ('A@evenline.example', 'A', 'x')"],
    ['events_days_in_order', 'update events set ends_on = starts_on - 1'],
    ['wheel_scales_run_named', "update wheel_scales set source = 'run', run_id = null"],
    ['cars_offsets_together', 'update cars set seat_behind_nose_m = 2.1'],
    ['cars_seat_in_car', 'update cars set seat_behind_nose_m = -1, aerial_behind_nose_m = 1'],
    ['cars_aerial_on_car', "update cars set seat_behind_nose_m = 1, aerial_behind_nose_m = 'NaN'"],
    ['wheel_setups_second_channel_range', 'update wheel_setups set second_channel = 16'],
    ['wheel_setups_second_channel_other', 'update wheel_setups set second_channel = channel'],
    ['wheel_scales_positive', 'update wheel_scales set mm_per_pulse = 0'],
    ['race_classes_has_sections', "update race_classes set sections = '[]'"],
    ['auth_sessions_id_is_digest', "update auth_sessions set id = 'token'"],
  ])('what breaks %s', async (constraint, text) => {
    await expect(query(text)).rejects.toMatchObject({ constraint });
  });
});

describe('journal chunks', () => {
  it('lie out of line and uncompressed', async () => {
    const { rows } = await query("select attstorage from pg_attribute where attrelid = 'run_chunks'::regclass and attname = 'bytes'");
    expect(rows).toEqual([{ attstorage: 'e' }]);
  });
});
