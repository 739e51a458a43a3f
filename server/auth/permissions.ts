import type { MemberRole } from '#shared/api/auth.ts';

/**
 * Who may do what: one row an action, and nobody asks anything else. A team's roles act on what the team owns; an event's
 * offices act on everything entered in that event. Someone outside both is told 404, as if it did not exist.
 */
export type EventOffice = 'organiser' | 'timekeeper' | 'scrutineer' | 'marshal';

interface Allowed {
  readonly team: readonly MemberRole[];
  readonly event: readonly EventOffice[];
  /** A tablet with an upload grant for the entry. */
  readonly grant: boolean;
}

const EVERYONE: readonly MemberRole[] = ['manager', 'navigator', 'driver', 'crew'];
const PREPARERS: readonly MemberRole[] = ['manager', 'navigator'];

const table = {
  'team.read': { team: EVERYONE, event: [], grant: false },
  'garage.read': { team: EVERYONE, event: [], grant: false },
  'events.read': { team: EVERYONE, event: [], grant: false },
  'practice-event.create': { team: PREPARERS, event: [], grant: false },
  'course-book.publish': { team: PREPARERS, event: [], grant: false },
  'course-book.read': { team: EVERYONE, event: ['organiser', 'timekeeper', 'scrutineer', 'marshal'], grant: false },
  'release.set': { team: PREPARERS, event: ['organiser', 'timekeeper'], grant: false },
  // A pack holds the team's own places: no office of the event may load it.
  'pack.load': { team: PREPARERS, event: [], grant: false },
  'cockpit-settings.set': { team: PREPARERS, event: [], grant: false },
  'runs.read': { team: EVERYONE, event: [], grant: false },
  // Any member may hold the tablet after the finish; what it adds can only be added.
  'run.upload': { team: EVERYONE, event: [], grant: true },
  'counting-run.set': { team: PREPARERS, event: [], grant: false },
} as const satisfies Readonly<Record<string, Allowed>>;

export type Action = keyof typeof table;
export const PERMISSIONS: Readonly<Record<Action, Allowed>> = table;
export const ACTIONS = Object.keys(table) as readonly Action[];

export const teamRoleMay = (role: MemberRole, action: Action): boolean => PERMISSIONS[action].team.includes(role);
export const officeMay = (offices: readonly EventOffice[], action: Action): boolean =>
  offices.some((office) => PERMISSIONS[action].event.includes(office));
