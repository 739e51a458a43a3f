import { type PackResponse, packResponseSchema } from '#shared/api/pack.ts';
import { request } from '#src/api/request.ts';

/** Makes the attempt's pack as of now, and with it an upload grant for this device. */
export const loadPack = (attemptId: string): Promise<PackResponse> =>
  request(packResponseSchema, `/attempts/${attemptId}/pack`, { method: 'POST' });
