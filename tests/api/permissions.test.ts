import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { ALL_ROUTES } from '#server/routes/all-routes.ts';
import { PRACTICE_COURSE } from '#server/services/practice/practice-course.ts';
import type { Caller } from './support/caller.ts';
import { type House, openHouse } from './support/house.ts';
import { EVERYBODY, type Scene, setScene, type Who } from './support/scene.ts';
import { headerFor, sealOf, shortJournal } from './support/tablet.ts';

/**
 * Every route asked by everybody. The expected answers are written down here, not taken from the permission table: `yes` =
 * let through, `no` = 403, `none` = 404, `sign in` = 401. A route without a row fails.
 */
type Answer = 'yes' | 'no' | 'none' | 'sign in';
type Answers = Readonly<Record<Who, Answer>>;
interface Row {
  readonly ask: (caller: Caller, scene: Scene) => PromiseLike<{ readonly status: number; readonly body: { readonly code?: string } }>;
  readonly answers: Answers;
}

const everyone = (answer: Answer): Answers => Object.fromEntries(EVERYBODY.map((who) => [who, answer])) as Answers;
const outsiders: Answers = { ...everyone('none'), anonymous: 'sign in', ended: 'sign in', grant: 'sign in', 'foreign grant': 'sign in' };
const members: Answers = { ...outsiders, manager: 'yes', navigator: 'yes', driver: 'yes', crew: 'yes' };
const preparers: Answers = { ...members, driver: 'no', crew: 'no' };
/** Officials of the event know its entries: they are told no, where a stranger is told there is none. */
const entryMembers: Answers = { ...members, organiser: 'no', marshal: 'no' };
const entryPreparers: Answers = { ...preparers, organiser: 'no', marshal: 'no' };
const uploaders: Answers = { ...entryMembers, grant: 'yes', 'foreign grant': 'none' };

const chunks = shortJournal(2);
const [firstChunk] = chunks;

const MATRIX: Readonly<Record<string, Row>> = {
  'get /time': { ask: (c) => c.get('/api/time'), answers: everyone('yes') },
  'get /health': { ask: (c) => c.get('/api/health'), answers: everyone('yes') },
  // Whoever has nothing yet must reach these; what they then answer is held by the tests of signing in.
  'post /auth/sign-up': { ask: (c) => c.post('/api/auth/sign-up', {}), answers: everyone('yes') },
  'post /auth/sign-in': { ask: (c) => c.post('/api/auth/sign-in', {}), answers: everyone('yes') },
  'get /auth/me': {
    ask: (c) => c.get('/api/auth/me'),
    answers: { ...everyone('yes'), anonymous: 'sign in', ended: 'sign in', grant: 'sign in', 'foreign grant': 'sign in' },
  },
  'get /teams/:teamId': { ask: (c, { team }) => c.get(`/api/teams/${team.teamId}`), answers: members },
  'get /teams/:teamId/garage': { ask: (c, { team }) => c.get(`/api/teams/${team.teamId}/garage`), answers: members },
  'get /teams/:teamId/events': { ask: (c, { team }) => c.get(`/api/teams/${team.teamId}/events`), answers: members },
  'get /teams/:teamId/runs': { ask: (c, { team }) => c.get(`/api/teams/${team.teamId}/runs`), answers: members },
  'post /teams/:teamId/practice-event': { ask: (c, { team }) => c.post(`/api/teams/${team.teamId}/practice-event`), answers: preparers },
  'post /teams/:teamId/course-books': {
    ask: (c, { team }) => c.post(`/api/teams/${team.teamId}/course-books`, { ...PRACTICE_COURSE, courseBookId: null }),
    answers: preparers,
  },
  'get /course-books/:id': {
    ask: (c, { team }) => c.get(`/api/course-books/${team.bookId}`),
    answers: { ...members, organiser: 'yes', marshal: 'yes' },
  },
  'patch /attempts/:id': {
    ask: (c, { team }) => c.patch(`/api/attempts/${team.loaded.attemptId}`, { releaseMs: null }),
    answers: { ...entryPreparers, organiser: 'yes' },
  },
  'post /attempts/:id/pack': { ask: (c, { team }) => c.post(`/api/attempts/${team.loaded.attemptId}/pack`), answers: entryPreparers },
  'patch /entries/:id/cockpit-settings': {
    ask: (c, { team: { loaded } }) =>
      c.patch(`/api/entries/${loaded.entryId}/cockpit-settings`, { ...loaded.pack.settings, reserveS: loaded.pack.plan.reserveS ?? 0 }),
    answers: entryPreparers,
  },
  'post /entries/:id/counting-run': {
    ask: (c, { team }) => c.post(`/api/entries/${team.loaded.entryId}/counting-run`, { runId: team.header.runId }),
    answers: entryPreparers,
  },
  'put /runs/:id': {
    ask: (c, { team }) => {
      const header = headerFor(team.loaded);
      return c.put(`/api/runs/${header.runId}`, header);
    },
    answers: uploaders,
  },
  'get /runs/:id/chunks': { ask: (c, { team }) => c.get(`/api/runs/${team.header.runId}/chunks`), answers: uploaders },
  'put /runs/:id/chunks/:n': {
    ask: (c, { team }) => c.chunk(team.header.runId, 0, firstChunk?.bytes ?? new Uint8Array(), firstChunk?.digest ?? ''),
    answers: uploaders,
  },
  'post /runs/:id/seal': { ask: (c, { team }) => c.post(`/api/runs/${team.header.runId}/seal`, sealOf(chunks)), answers: uploaders },
  'get /runs/:id': { ask: (c, { team }) => c.get(`/api/runs/${team.header.runId}`), answers: entryMembers },
  'get /runs/:id/journal': { ask: (c, { team }) => c.get(`/api/runs/${team.header.runId}/journal`), answers: entryMembers },
  // These two end what the others are asked with, so they come last.
  'post /entries/:id/revoke-grants': {
    ask: (c, { team }) => c.post(`/api/entries/${team.loaded.entryId}/revoke-grants`),
    answers: entryPreparers,
  },
  'post /auth/sign-out': { ask: (c) => c.post('/api/auth/sign-out'), answers: everyone('yes') },
};

/** What was answered, from status and code. Faults of the body or of its time show that the caller was let through. */
function answerOf({ status, body }: { readonly status: number; readonly body: { readonly code?: string } }): Answer | string {
  if (status === 401 && body.code !== 'SIGN_IN_FAILED') return 'sign in';
  if (status === 403) return 'no';
  if (status === 404) return 'none';
  const letThrough = status < 300 || ['INVALID_REQUEST', 'PRACTICE_EVENT_EXISTS'].includes(body.code ?? '');
  return letThrough ? 'yes' : `${status} ${body.code}`;
}

let house: House;
let scene: Scene;
beforeAll(async () => {
  house = await openHouse();
  scene = await setScene(house);
});
afterAll(() => house.close());

describe('who may do what', () => {
  it('is written down for every route there is, and for no other', () => {
    expect(Object.keys(MATRIX).sort()).toEqual(ALL_ROUTES.map((route) => `${route.method} ${route.path}`).sort());
  });

  describe.each(Object.entries(MATRIX))('%s', (_route, row) => {
    it.each(EVERYBODY.map((who) => [who, row.answers[who]] as const))('%s: %s', async (who, expected) => {
      const response = await row.ask(scene.callers[who], scene);
      expect(answerOf(response)).toBe(expected);
      if (expected !== 'yes')
        expect(response.body).toEqual({ code: expect.any(String), message: expect.any(String), requestId: expect.any(String) });
    });
  });
});
