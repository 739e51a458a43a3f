import { queryOptions } from '@tanstack/react-query';
import { courseBookResponseSchema } from '#shared/api/course-book.ts';
import { keys } from '#src/api/query-keys.ts';
import { request } from '#src/api/request.ts';

/** A version never changes, so it never goes stale. */
export const courseBookQuery = (userId: string, bookId: string, version: number) =>
  queryOptions({
    queryKey: keys.courseBook(userId, bookId, version),
    queryFn: ({ signal }) => request(courseBookResponseSchema, `/course-books/${bookId}?version=${version}`, { signal }),
    staleTime: Number.POSITIVE_INFINITY,
  });
