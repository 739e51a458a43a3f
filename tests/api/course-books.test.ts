import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { PRACTICE_COURSE } from '#server/services/practice/practice-course.ts';
import { type CourseBookResponse, courseBookResponseSchema } from '#shared/api/course-book.ts';
import type { Checkpoint } from '#shared/course/course-book.ts';
import { type House, openHouse } from './support/house.ts';
import { newManager, type Person } from './support/people.ts';

let house: House;
let person: Person;
beforeAll(async () => {
  house = await openHouse();
  person = await newManager(house);
});
afterAll(() => house.close());

const book = { ...PRACTICE_COURSE, courseBookId: null as string | null };
const publish = (content: object) => person.post(`/api/teams/${person.teamId}/course-books`, content);
const published = async (content: object): Promise<CourseBookResponse> =>
  courseBookResponseSchema.parse((await publish(content).expect(201)).body);
const withCheckpoints = (change: (checkpoints: Checkpoint[]) => Checkpoint[]) => ({ ...book, checkpoints: change([...book.checkpoints]) });

describe('publishing a course book', () => {
  it('gives back what was sent, distances as printed, as version 1', async () => {
    const { courseBook } = await published(book);
    expect(courseBook).toEqual({ ...PRACTICE_COURSE, id: courseBook.id, version: 1 });
    const read = await person.get(`/api/course-books/${courseBook.id}`).expect(200);
    expect(read.body.courseBook).toEqual(courseBook);
  });

  it('again gives the next version, and leaves the one before readable', async () => {
    const { courseBook: first } = await published(book);
    const { courseBook: second } = await published({ ...book, courseBookId: first.id, notes: 'Bulletin 1: the barn is gone' });
    expect(second).toMatchObject({ id: first.id, version: 2 });
    expect((await person.get(`/api/course-books/${first.id}?version=1`).expect(200)).body.courseBook).toEqual(first);
    expect((await person.get(`/api/course-books/${first.id}`).expect(200)).body.courseBook).toEqual(second);
    await person.get(`/api/course-books/${first.id}?version=3`).expect(404);
  });

  it('at the same moment gives each its own version', async () => {
    const { courseBook: first } = await published(book);
    const answers = await Promise.all([1, 2, 3].map(() => published({ ...book, courseBookId: first.id })));
    expect(answers.map((answer) => answer.courseBook.version).sort()).toEqual([2, 3, 4]);
  });

  it('never changes a version, whoever asks the database', async () => {
    const { courseBook } = await published(book);
    const { pool } = house.connection;
    await expect(
      pool.query('update course_book_versions set body = body || \'{"notes":""}\' where course_book_id = $1', [courseBook.id]),
    ).rejects.toThrow(/never change/);
    await expect(pool.query('delete from course_book_versions where course_book_id = $1', [courseBook.id])).rejects.toThrow(/never change/);
  });

  it('of checkpoints out of order names the place, and publishes nothing', async () => {
    const swapped = withCheckpoints((c) =>
      c.map((checkpoint, i) => (i === 2 ? { ...(c[3] as Checkpoint) } : i === 3 ? { ...(c[2] as Checkpoint) } : checkpoint)),
    );
    const before = await house.connection.pool.query('select count(*) from course_books');
    const response = await publish(swapped).expect(422);
    expect(response.body).toMatchObject({ code: 'COURSE_BOOK_INVALID', faults: [expect.objectContaining({ code: 'OUT_OF_ORDER' })] });
    expect(response.body.message).toMatch(/checkpoints\[3\]/);
    expect((await house.connection.pool.query('select count(*) from course_books')).rows).toEqual(before.rows);
  });

  it.each([
    ['without a finish', withCheckpoints((c) => c.filter((checkpoint) => checkpoint.duty !== 'finish')), 422],
    ['without a start', withCheckpoints((c) => c.slice(1)), 422],
    ['with one id twice', withCheckpoints((c) => c.map((checkpoint) => ({ ...checkpoint, id: 'same' }))), 422],
    [
      'with a zone that ends before it begins',
      { ...book, zones: book.zones.map((zone) => ({ ...zone, to: { text: '1', unit: 'km' } })) },
      422,
    ],
    [
      'with a distance that is no number',
      withCheckpoints((c) => c.map((checkpoint) => ({ ...checkpoint, at: { text: '1,5', unit: 'km' } }))),
      400,
    ],
    ['with a duty nobody knows', withCheckpoints((c) => c.map((checkpoint) => ({ ...checkpoint, duty: 'lunch' as 'place' }))), 400],
    ['with a thousand places', withCheckpoints((c) => Array.from({ length: 1000 }, () => c[1] as Checkpoint)), 400],
  ])('%s is refused', async (_what, content, status) => {
    const response = await publish(content).expect(status);
    expect(response.body.faults.length).toBeGreaterThan(0);
  });

  it('over a book of another team is refused as if there were none', async () => {
    const { courseBook } = await published(book);
    const stranger = await newManager(house);
    await stranger.get(`/api/course-books/${courseBook.id}`).expect(404);
    await stranger.post(`/api/teams/${stranger.teamId}/course-books`, { ...book, courseBookId: courseBook.id }).expect(404);
  });
});
