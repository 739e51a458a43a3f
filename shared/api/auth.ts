import { z } from 'zod';
import { idSchema, nameSchema } from './fields.ts';

export const PASSWORD_MIN = 8;
export const PASSWORD_MAX = 256;
export const MEMBER_ROLES = ['manager', 'navigator', 'driver', 'crew'] as const;
export type MemberRole = (typeof MEMBER_ROLES)[number];
export const TEAM_KINDS = ['crew', 'organiser'] as const;

const emailSchema = z.string().trim().toLowerCase().max(254).pipe(z.email());

/** POST /api/auth/sign-up: makes the person, a team, and the person its manager. */
export const signUpRequestSchema = z.strictObject({
  email: emailSchema,
  password: z.string().min(PASSWORD_MIN).max(PASSWORD_MAX),
  name: nameSchema,
  teamName: nameSchema,
});
export type SignUpRequest = z.infer<typeof signUpRequestSchema>;

/** POST /api/auth/sign-in. */
export const signInRequestSchema = z.strictObject({ email: emailSchema, password: z.string().min(1).max(PASSWORD_MAX) });
export type SignInRequest = z.infer<typeof signInRequestSchema>;

/** GET /api/auth/me and the answer to signing up or in. Signing out answers 204. */
export const meResponseSchema = z.object({
  user: z.object({ id: idSchema, email: z.string(), name: z.string() }),
  teams: z.array(z.object({ id: idSchema, name: z.string(), kind: z.enum(TEAM_KINDS), role: z.enum(MEMBER_ROLES) })),
});
export type MeResponse = z.infer<typeof meResponseSchema>;
