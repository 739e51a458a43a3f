import { type SetReleaseResponse, setReleaseResponseSchema } from '#shared/api/attempts.ts';
import { request } from '#src/api/request.ts';

/** `releaseMs` null clears the release. */
export const setRelease = (attemptId: string, releaseMs: number | null): Promise<SetReleaseResponse> =>
  request(setReleaseResponseSchema, `/attempts/${attemptId}`, { method: 'PATCH', body: { releaseMs } });
