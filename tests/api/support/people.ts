import { randomBytes } from 'node:crypto';
import { memberships } from '#server/db/schema/memberships.ts';
import { type MemberRole, type MeResponse, meResponseSchema } from '#shared/api/auth.ts';
import { type Caller, callerOf } from './caller.ts';
import type { House } from './house.ts';

export interface Person extends Caller {
  readonly userId: string;
  readonly email: string;
  readonly teamId: string;
}

export const PASSWORD = 'seven grey pebbles';
export const someEmail = (): string => `p${randomBytes(6).toString('hex')}@evenline.example`;

/** Signs up through the door: manager of a new team. */
export async function newManager(house: House, teamName = 'Team Test'): Promise<Person> {
  const caller = callerOf(house);
  const email = someEmail();
  const response = await caller.post('/api/auth/sign-up', { email, password: PASSWORD, name: 'Somebody', teamName }).expect(201);
  const me: MeResponse = meResponseSchema.parse(response.body);
  return { ...caller, userId: me.user.id, email, teamId: me.teams[0]?.id ?? '' };
}

/** Somebody with that role in that team. Invitations do not exist yet, so the row is written directly. */
export async function newMember(house: House, teamId: string, role: MemberRole): Promise<Person> {
  const person = await newManager(house, 'Somewhere else');
  await house.connection.db.insert(memberships).values({ teamId, userId: person.userId, role });
  return { ...person, teamId };
}
