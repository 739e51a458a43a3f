import { getCourseBook } from '#server/services/course-books/get-course-book.ts';
import { answer, idParam, numberFrom, type Route } from './route.ts';

export const courseBookRoutes: readonly Route[] = [
  {
    method: 'get',
    path: '/course-books/:id',
    access: 'course-book.read',
    body: 'none',
    handle: async ({ ctx, request }) => answer(await getCourseBook(ctx, idParam(request, 'id'), numberFrom(request.query['version']))),
  },
];
