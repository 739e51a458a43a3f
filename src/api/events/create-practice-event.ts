import { type PracticeEventResponse, practiceEventResponseSchema } from '#shared/api/events.ts';
import { request } from '#src/api/request.ts';

/** An invented course, class, car, entry and attempt for a team that has none. */
export const createPracticeEvent = (teamId: string): Promise<PracticeEventResponse> =>
  request(practiceEventResponseSchema, `/teams/${teamId}/practice-event`, { method: 'POST' });
