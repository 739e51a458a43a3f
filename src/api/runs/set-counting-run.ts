import { type SetCountingRunResponse, setCountingRunResponseSchema } from '#shared/api/entries.ts';
import { request } from '#src/api/request.ts';

/** Of several runs of one attempt, this one counts. */
export const setCountingRun = (entryId: string, runId: string): Promise<SetCountingRunResponse> =>
  request(setCountingRunResponseSchema, `/entries/${entryId}/counting-run`, { method: 'POST', body: { runId } });
