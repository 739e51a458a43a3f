import { type MeResponse, meResponseSchema, type SignUpRequest } from '#shared/api/auth.ts';
import { request } from '#src/api/request.ts';

/** Makes the person, a team, and the person its manager. */
export const signUp = (body: SignUpRequest): Promise<MeResponse> => request(meResponseSchema, '/auth/sign-up', { method: 'POST', body });
