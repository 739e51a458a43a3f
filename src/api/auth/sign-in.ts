import { type MeResponse, meResponseSchema, type SignInRequest } from '#shared/api/auth.ts';
import { request } from '#src/api/request.ts';

export const signIn = (body: SignInRequest): Promise<MeResponse> => request(meResponseSchema, '/auth/sign-in', { method: 'POST', body });
