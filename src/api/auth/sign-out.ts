import { requestNothing } from '#src/api/request.ts';

export const signOut = (): Promise<void> => requestNothing('/auth/sign-out', { method: 'POST' });
