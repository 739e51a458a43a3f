import { eventMembers } from '#server/db/schema/event-members.ts';
import type { RunHeader } from '#shared/journal/run-header.ts';
import { type Caller, callerOf } from './caller.ts';
import type { House } from './house.ts';
import { newManager, newMember, type Person } from './people.ts';
import { headerFor, type Loaded, loadPractice, sealOf, sendAll, shortJournal } from './tablet.ts';

/** A team with something of everything, everyone who may have to do with it, and everyone who may not. */
export interface Scene {
  readonly team: { readonly teamId: string; readonly loaded: Loaded; readonly bookId: string; readonly header: RunHeader };
  readonly callers: Readonly<Record<Who, Caller>>;
}

export const EVERYBODY = [
  'anonymous',
  'ended',
  'foreign manager',
  'manager',
  'navigator',
  'driver',
  'crew',
  'organiser',
  'marshal',
  'grant',
  'foreign grant',
] as const;
export type Who = (typeof EVERYBODY)[number];

export async function setScene(house: House): Promise<Scene> {
  const manager = await newManager(house);
  const loaded = await loadPractice(manager);
  const header = headerFor(loaded);
  const chunks = shortJournal(2);
  await sendAll(manager, header, chunks);
  await manager.post(`/api/runs/${header.runId}/seal`, sealOf(chunks)).expect(202);
  const foreign = await newManager(house, 'Another team');
  const foreignLoaded = await loadPractice(foreign);
  return {
    team: { teamId: manager.teamId, loaded, bookId: loaded.pack.courseBook.id, header },
    callers: {
      anonymous: callerOf(house),
      ended: await endedMember(house, manager.teamId),
      'foreign manager': foreign,
      manager,
      navigator: await newMember(house, manager.teamId, 'navigator'),
      driver: await newMember(house, manager.teamId, 'driver'),
      crew: await newMember(house, manager.teamId, 'crew'),
      organiser: await official(house, loaded.eventId, 'organiser'),
      marshal: await official(house, loaded.eventId, 'marshal'),
      grant: callerOf(house, loaded.grant),
      'foreign grant': callerOf(house, foreignLoaded.grant),
    },
  };
}

/** A manager of the team whose sign-in was ended on the server while the browser still sends its cookie. */
async function endedMember(house: House, teamId: string): Promise<Person> {
  const person = await newMember(house, teamId, 'manager');
  await person.get('/api/auth/me').expect(200);
  await house.deps.authSessions.endAll(person.userId);
  return person;
}

/** Somebody with an office at the event and no place in the team. */
async function official(house: House, eventId: string, role: 'organiser' | 'marshal'): Promise<Person> {
  const person = await newManager(house, 'Road office');
  await house.connection.db.insert(eventMembers).values({ eventId, userId: person.userId, role });
  return person;
}
