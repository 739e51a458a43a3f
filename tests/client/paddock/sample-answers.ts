import type { MeResponse } from '#shared/api/auth.ts';
import type { EventsResponse } from '#shared/api/events.ts';
import type { RunResponse, RunSummary } from '#shared/api/runs.ts';
import type { GarageResponse, TeamResponse } from '#shared/api/teams.ts';
import { CAUTIONS } from '#shared/cautions.ts';
import type { RunSheet } from '#shared/pace/run-sheet.ts';
import { IDS, sampleBook, sampleClass, samplePack } from './sample-pack.ts';

/** Answers of a server, for tests whose subject lies at the network's edge. */

export const sampleMe: MeResponse = {
  user: { id: IDS.user, email: 'ida@fernhill.example', name: 'Ida Marlow' },
  teams: [{ id: IDS.team, name: 'Fernhill', kind: 'crew', role: 'navigator' }],
};

const bookSummary = {
  id: IDS.book,
  version: sampleBook.version,
  name: sampleBook.name,
  unit: 'km' as const,
  lengthM: 61_000,
  checkpoints: 3,
  zones: 2,
  publishedMs: Date.UTC(2026, 4, 1),
};

export const sampleRun: RunSummary = {
  id: IDS.run,
  eventId: IDS.event,
  eventName: samplePack.event.name,
  timeZone: samplePack.event.timeZone,
  entryId: IDS.entry,
  entryNumber: '27',
  carName: 'Blue estate',
  attemptId: IDS.morning,
  attemptNumber: 1,
  courseBookName: sampleBook.name,
  raceClassName: '180',
  deviceId: 'tablet-1',
  practice: false,
  clockRate: 1,
  createdMs: Date.UTC(2026, 5, 13, 8, 12),
  status: 'ready',
  counts: true,
  outcome: 'finished',
  finish: { elapsedS: 1220.31, timeErrorS: 0.31, sigmaS: 0.12 },
};

type Attempt = EventsResponse['events'][number]['entries'][number]['attempts'][number];

export function sampleAttempt(more: Partial<Attempt> = {}): Attempt {
  return {
    id: IDS.morning,
    number: 1,
    releaseMs: samplePack.attempt.releaseMs,
    stagedBehindM: 3,
    courseBook: bookSummary,
    ownCheckpoints: 5,
    packDigest: 'a'.repeat(64),
    packFault: null,
    countingRunId: null,
    runs: [],
    ...more,
  };
}

export function sampleEvents(attempts: readonly Attempt[]): EventsResponse {
  return {
    nowMs: Date.UTC(2026, 5, 12, 16),
    cautions: [...CAUTIONS],
    events: [
      {
        id: IDS.event,
        name: samplePack.event.name,
        place: samplePack.event.place,
        timeZone: samplePack.event.timeZone,
        startsOn: '2026-06-13',
        endsOn: '2026-06-14',
        practice: false,
        owner: { id: IDS.team, name: 'Fernhill' },
        rules: structuredClone(samplePack.event.rules),
        raceClasses: [structuredClone(sampleClass) as EventsResponse['events'][number]['raceClasses'][number]],
        courseBooks: [bookSummary],
        entries: [
          {
            id: IDS.entry,
            number: '27',
            team: { id: IDS.team, name: 'Fernhill' },
            car: { id: IDS.car, name: 'Blue estate', wheelSetup: 'Road 19' },
            crew: samplePack.entry.crew.map((member) => ({ ...member })),
            raceClassId: IDS.raceClass,
            mayPrepare: true,
            settings: { ...samplePack.settings, reserveS: 0 },
            attempts: [...attempts],
          },
        ],
      },
    ],
  };
}

export const sampleTeam: TeamResponse = {
  team: { id: IDS.team, name: 'Fernhill', kind: 'crew' },
  myRole: 'navigator',
  members: [
    { userId: IDS.user, name: 'Ida Marlow', role: 'navigator' },
    { userId: IDS.car, name: 'Tom Reyne', role: 'driver' },
    { userId: IDS.entry, name: 'Greta Holm', role: 'manager' },
  ],
  cars: [{ id: IDS.car, name: 'Blue estate', dialReadsHighPercent: 3.5 }],
};

export const sampleGarage: GarageResponse = {
  cars: [
    {
      id: IDS.car,
      name: 'Blue estate',
      dialReadsHighPercent: 3.5,
      behindNose: { seatM: 2.1, aerialM: 1.6 },
      wheelSetups: [
        {
          id: IDS.setup,
          name: 'Road 19',
          tyre: '255/40 R19 100H',
          channel: 0,
          pulsesPerTurn: 4,
          driven: true,
          secondChannel: null,
          scales: [
            {
              id: IDS.run,
              mmPerPulse: 512.4,
              scaleSigma: 0.0012,
              source: 'run',
              runId: IDS.run,
              note: 'after the practice day, warm',
              recordedMs: Date.UTC(2026, 5, 12, 14),
            },
            {
              id: IDS.book,
              mmPerPulse: 511.08,
              scaleSigma: 0.003,
              source: 'measured distance',
              runId: null,
              note: 'measured mile on the bypass',
              recordedMs: Date.UTC(2026, 5, 1, 9),
            },
            {
              id: IDS.event,
              mmPerPulse: 508,
              scaleSigma: 0.01,
              source: 'nominal',
              runId: null,
              note: '',
              recordedMs: Date.UTC(2026, 4, 20, 9),
            },
          ],
        },
      ],
    },
  ],
};

/** Shaped like a run sheet, its figures invented: for pages that only have to show what they are given. */
export const sampleSheet: RunSheet = {
  engine: '1.0.0',
  runId: IDS.run,
  outcome: 'finished',
  practice: false,
  clockRate: 1,
  releaseMs: samplePack.attempt.releaseMs,
  targetTimeS: 1220,
  reactionS: 0.42,
  legs: [
    leg('start', 'Start', 'start', 0, 'distance', 0, 0, null, null, 512.4, 512.4, null),
    leg('quarry', 'Quarry gate, near post', 'settle', 4310, 'tap', 9.31, 8.7, 4298.6, 11.4, 512.4, 512.4, 'settle'),
    leg('mill', 'Mill chimney', 'scale', 16_850, 'tap', 3.02, 3.4, 16_839.2, 10.8, 512.4, 512.741, null),
    leg('barn', 'Long barn, far edge', 'scale', 31_220, 'tap', 6.4, 6.01, 31_224.3, -4.3, 512.741, 512.655, null),
    leg('shrine', 'Wayside shrine', 'place', 46_075, 'distance', 12.8, 11.9, null, null, 512.655, 512.655, null),
    leg('mast', 'Radio mast', 'scale', 57_640, 'tap', 2.91, 2.53, 57_631.7, 8.3, 512.655, 512.655, 'leg too short'),
    leg('finish', 'Finish', 'finish', 61_000, 'distance', 0.31, 0, null, null, 512.655, 512.655, null),
  ],
  finish: { elapsedS: 1220.31, timeErrorS: 0.31, sigmaS: 0.12 },
  shown: { engine: '1.0.0', elapsedS: 1220.31, timeErrorS: 0.31, agrees: true },
  trace: Array.from({ length: 245 }, (_, i) => {
    const d = i * 250;
    const planned = 9 * Math.exp(-d / 9000) - 4 * Math.sin(d / 9000);
    return { d, elapsedS: d / 50 + planned, timeErrorS: planned + Math.sin(d / 2500) * 0.6, plannedS: planned, speed: 50 };
  }),
  stops: [],
  taps: [{ seq: 812, checkpoint: 'shrine', verdict: 'doubted', movedM: 42.3 }],
  aidsUsed: ['wheel'],
  pulses: 119_203,
  observations: 124_871,
  unknownTypes: [],
  warnings: ['no wheel pulses for 1.2 s at 22.4 km'],
};

function leg(
  checkpointId: string,
  name: string,
  duty: string,
  officialM: number,
  by: 'tap' | 'distance',
  timeErrorS: number,
  plannedS: number,
  measuredM: number | null,
  movedM: number | null,
  scaleBefore: number,
  scaleAfter: number,
  scaleKept: string | null,
): RunSheet['legs'][number] {
  const targetS = officialM / 50;
  const elapsedS = targetS + timeErrorS;
  return {
    checkpointId,
    name,
    duty,
    officialM,
    by,
    atUs: elapsedS * 1e6,
    elapsedS,
    targetS,
    timeErrorS,
    plannedS,
    measuredM,
    movedM,
    scaleBefore,
    scaleAfter,
    scaleKept,
  };
}

export function sampleRunResponse(more: Partial<RunResponse> = {}): RunResponse {
  return {
    run: sampleRun,
    held: { runId: IDS.run, count: 12, head: 'b'.repeat(64), sealed: true },
    pack: structuredClone(samplePack) as RunResponse['pack'],
    sheet: structuredClone(sampleSheet) as NonNullable<RunResponse['sheet']>,
    result: {
      engine: '1.0.0',
      packDigest: 'a'.repeat(64),
      journalHead: 'b'.repeat(64),
      amendmentHead: '0'.repeat(64),
      computedMs: Date.UTC(2026, 5, 13, 10),
    },
    failure: null,
    ...more,
  };
}
