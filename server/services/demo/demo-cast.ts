import type { EventOffice } from '#server/auth/permissions.ts';
import type { MemberRole } from '#shared/api/auth.ts';

/** The people and cars of the demo. All invented. */

/** Printed at every start of a server that holds the demo. It opens nothing but the demo. */
export const DEMO_PASSWORD = 'even-line-demo';

export interface Person {
  readonly key: string;
  readonly name: string;
  readonly email: string;
}

const person = (key: string, name: string): Person => ({ key, name, email: `${key}@evenline.example` });

export const CREW_TEAM: { readonly name: string; readonly members: readonly (Person & { readonly role: MemberRole })[] } = {
  name: 'Team Plumbline',
  members: [
    { ...person('manager', 'Mira Holten'), role: 'manager' },
    { ...person('navigator', 'Ada Quillam'), role: 'navigator' },
    { ...person('driver', 'Jonas Farrowby'), role: 'driver' },
    { ...person('crew', 'Sten Oskery'), role: 'crew' },
    { ...person('navigator2', 'Petra Lunnow'), role: 'navigator' },
    { ...person('driver2', 'Ivo Marlet'), role: 'driver' },
  ],
};

export const ORGANISER_TEAM: { readonly name: string; readonly members: readonly (Person & { readonly office: EventOffice })[] } = {
  name: 'Venholt Road Office',
  members: [
    { ...person('organiser', 'Greta Woldane'), office: 'organiser' },
    { ...person('timekeeper', 'Tomas Reevely'), office: 'timekeeper' },
  ],
};

export interface DemoCar {
  readonly name: string;
  readonly number: string;
  readonly driver: string;
  readonly navigator: string;
  readonly dialReadsHighPercent: number;
  readonly tyre: string;
  /** The engine drives the wheel whose pulses are counted. */
  readonly driven: boolean;
  /** One crew leaves it to the estimator, the other trusts the plain ratio: both can be seen on their run sheets. */
  readonly scaleRule: 'estimator' | 'ratio';
  readonly nominal: number;
  readonly measured: number;
}

export const CARS: readonly DemoCar[] = [
  {
    name: 'Wren',
    number: '7',
    driver: 'driver',
    navigator: 'navigator',
    dialReadsHighPercent: 4,
    tyre: '265/35 R18',
    driven: false,
    scaleRule: 'estimator',
    nominal: 84.9,
    measured: 85.31,
  },
  {
    name: 'Marten',
    number: '12',
    driver: 'driver2',
    navigator: 'navigator2',
    dialReadsHighPercent: 3,
    tyre: '255/40 R17',
    driven: true,
    scaleRule: 'ratio',
    nominal: 81.7,
    measured: 82.06,
  },
];
