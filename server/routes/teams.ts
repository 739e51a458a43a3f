import { publishCourseBook } from '#server/services/course-books/publish-course-book.ts';
import { listEvents } from '#server/services/events/list-events.ts';
import { createPracticeEvent } from '#server/services/practice/create-practice-event.ts';
import { listRuns } from '#server/services/runs/list-runs.ts';
import { getGarage } from '#server/services/teams/get-garage.ts';
import { getTeam } from '#server/services/teams/get-team.ts';
import { publishCourseBookRequestSchema } from '#shared/api/course-book.ts';
import { answer, idParam, parseBody, type Route } from './route.ts';

export const teamRoutes: readonly Route[] = [
  {
    method: 'get',
    path: '/teams/:teamId',
    access: 'team.read',
    body: 'none',
    handle: async ({ ctx, request }) => answer(await getTeam(ctx, idParam(request, 'teamId'))),
  },
  {
    method: 'get',
    path: '/teams/:teamId/garage',
    access: 'garage.read',
    body: 'none',
    handle: async ({ ctx, request }) => answer(await getGarage(ctx, idParam(request, 'teamId'))),
  },
  {
    method: 'get',
    path: '/teams/:teamId/events',
    access: 'events.read',
    body: 'none',
    handle: async ({ ctx, request }) => answer(await listEvents(ctx, idParam(request, 'teamId'))),
  },
  {
    method: 'get',
    path: '/teams/:teamId/runs',
    access: 'runs.read',
    body: 'none',
    handle: async ({ ctx, request }) => answer(await listRuns(ctx, idParam(request, 'teamId'))),
  },
  {
    method: 'post',
    path: '/teams/:teamId/practice-event',
    access: 'practice-event.create',
    body: 'json',
    handle: async ({ ctx, request }) => answer(await createPracticeEvent(ctx, idParam(request, 'teamId')), 201),
  },
  {
    method: 'post',
    path: '/teams/:teamId/course-books',
    access: 'course-book.publish',
    body: 'json',
    async handle({ ctx, request }) {
      const teamId = idParam(request, 'teamId');
      return answer(await publishCourseBook(ctx, teamId, parseBody(publishCourseBookRequestSchema, request)), 201);
    },
  },
];
