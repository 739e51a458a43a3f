import { authCookie, clearedAuthCookie, readAuthCookie } from '#server/auth/cookie.ts';
import { me } from '#server/services/accounts/me.ts';
import { signIn } from '#server/services/accounts/sign-in.ts';
import { signUp } from '#server/services/accounts/sign-up.ts';
import { signInRequestSchema, signUpRequestSchema } from '#shared/api/auth.ts';
import { answer, type Call, NO_CONTENT, parseBody, type Reply, type Route } from './route.ts';

async function begin(call: Call, person: { readonly userId: string; readonly token: string }, status: number): Promise<Reply> {
  call.response.append('set-cookie', authCookie(person.token, call.cookie));
  return answer(await me({ ...call.ctx, actor: { kind: 'user', userId: person.userId } }), status);
}

/** A browser that signs in again leaves its former sign-in behind: it ends here, so that no token outlives its use. */
async function endFormer({ ctx, request, cookie }: Call): Promise<void> {
  const token = readAuthCookie(request.get('cookie'), cookie);
  if (token !== null) await ctx.authSessions.end(token);
}

export const authRoutes: readonly Route[] = [
  {
    method: 'post',
    path: '/auth/sign-up',
    access: 'public',
    body: 'json',
    async handle(call) {
      const person = await signUp(call.ctx, parseBody(signUpRequestSchema, call.request));
      await endFormer(call);
      return begin(call, person, 201);
    },
  },
  {
    method: 'post',
    path: '/auth/sign-in',
    access: 'public',
    body: 'json',
    async handle(call) {
      const person = await signIn(call.ctx, parseBody(signInRequestSchema, call.request), call.request.ip ?? '');
      await endFormer(call);
      return begin(call, person, 200);
    },
  },
  {
    method: 'post',
    path: '/auth/sign-out',
    access: 'public',
    body: 'json',
    async handle(call) {
      await endFormer(call);
      call.response.append('set-cookie', clearedAuthCookie(call.cookie));
      return NO_CONTENT;
    },
  },
  { method: 'get', path: '/auth/me', access: 'signed in', body: 'none', handle: async ({ ctx }) => answer(await me(ctx)) },
];
