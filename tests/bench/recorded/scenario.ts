import type { Checkpoint, Duty } from '#shared/course/course-book.ts';
import type { Pack } from '#shared/course/pack.ts';
import { place, pack as somePack } from '#tests/unit/pace/packs.ts';
import type { RecordedDrive } from './recorded-drive.ts';

/** What the crew uses on a drive. */
export interface Scenario {
  /** Column of the table: which source. */
  readonly source: string;
  /** Column of the table: what is done at the places. */
  readonly corrections: string;
  readonly channel: number | null;
  readonly secondChannel: number | null;
  readonly gnssSpeed: boolean;
  readonly gnssPosition: boolean;
  readonly geometry: boolean;
  readonly touches: boolean;
  readonly rule: Pack['settings']['scaleRule'];
}

const RULES = [
  ['none', false, 'place only'],
  ['untouched estimator', false, 'estimator'],
  ['place', true, 'place only'],
  ['ratio', true, 'ratio'],
  ['gain', true, 'gain'],
  ['estimator', true, 'estimator'],
] as const;

type Means = Omit<Scenario, 'corrections' | 'touches' | 'rule'>;

/** With a wheel alone nothing tells the estimator more than the rule that places only, until a place is touched. */
const WHEEL_ONLY = ['none', 'place', 'ratio', 'gain', 'estimator'];
const FUSED = ['untouched estimator', 'estimator'];

const withRules = (means: Means, names: readonly string[]): Scenario[] =>
  RULES.filter(([name]) => names.includes(name)).map(([corrections, touches, rule]) => ({ ...means, corrections, touches, rule }));

const NOTHING = { channel: null, secondChannel: null, gnssSpeed: false, gnssPosition: false, geometry: false };

/** `quick`: without the second wheel beside the first. */
export function scenariosOf(drive: RecordedDrive, quick: boolean): Scenario[] {
  const { wheels, gnss, geometry } = drive;
  const onLine = { gnssSpeed: true, gnssPosition: true, geometry: true };
  const list = wheels.flatMap((wheel): Scenario[] => {
    const means: Means = { ...NOTHING, source: wheel.name, channel: wheel.channel };
    return [
      ...withRules(means, WHEEL_ONLY),
      ...(gnss.speed ? withRules({ ...means, source: `${wheel.name} + GNSS speed`, gnssSpeed: true }, FUSED) : []),
      ...(geometry === null ? [] : withRules({ ...means, ...onLine, source: `${wheel.name} + position on line` }, FUSED)),
    ];
  });
  const [first, second] = wheels;
  if (!quick && first !== undefined && second !== undefined)
    list.push(...withRules({ ...NOTHING, source: 'both', channel: first.channel, secondChannel: second.channel }, ['none', 'estimator']));
  if (gnss.speed) list.push(...withRules({ ...NOTHING, source: 'GNSS speed', gnssSpeed: true }, ['none', 'place', 'estimator']));
  if (gnss.position) list.push(...withRules({ ...NOTHING, source: 'GNSS positions', gnssPosition: true }, ['none', 'place']));
  if (geometry !== null) list.push(...withRules({ ...NOTHING, ...onLine, source: 'GNSS position on line' }, FUSED));
  return list;
}

/** A place about every 3 km, or every quarter of a shorter course; whole metres, as a book prints them. */
export function placesOf({ lengthM }: RecordedDrive): number[] {
  const spacing = Math.min(3000, Math.floor(lengthM / 4));
  const places: number[] = [];
  for (let at = spacing; at <= lengthM - spacing / 2; at += spacing) places.push(at);
  return places;
}

export const HABITS = { leadMs: 80, scatterMs: 100 };

const km = (metres: number): string => (metres / 1000).toFixed(3);

/** The average that the drive itself kept, so that its time error begins and ends near zero. */
export function packOf(drive: RecordedDrive, scenario: Scenario): Pack {
  const { lengthM, truth, releaseT } = drive;
  const elapsedMs = Math.round((truth.timeAt(lengthM) - releaseT) * 1000);
  const own = (duty: Duty, metres: number): Checkpoint => place(`at-${metres}`, duty, km(metres));
  const wheel = drive.wheels.find((w) => w.channel === scenario.channel);
  return {
    ...somePack,
    attempt: { ...somePack.attempt, stagedBehindM: drive.stagedBehindM },
    courseBook: {
      ...somePack.courseBook,
      checkpoints: [
        own('start', 0),
        ...placesOf(drive).map((metres, i) => own(i === 0 ? 'settle' : 'scale', metres)),
        own('finish', lengthM),
      ],
      ...(scenario.geometry && drive.geometry !== null ? { geometry: drive.geometry } : {}),
    },
    raceClass: {
      ...somePack.raceClass,
      targetTimeMs: elapsedMs,
      sections: [
        {
          kind: 'average',
          to: { text: km(lengthM), unit: 'km' },
          average: { text: ((lengthM / elapsedMs) * 3600).toFixed(3), unit: 'km/h' },
        },
      ],
      aids: {
        wheel: scenario.channel !== null,
        gnssSpeed: scenario.gnssSpeed,
        gnssPosition: scenario.gnssPosition,
        dataLink: false,
      },
    },
    wheel: {
      ...somePack.wheel,
      channel: scenario.channel ?? 0,
      ...(scenario.secondChannel === null ? {} : { secondChannel: scenario.secondChannel }),
      mmPerPulse: wheel?.mmPerPulse ?? 1000,
      scaleSigma: wheel?.scaleSigma ?? 0.003,
      scaleSource: 'measured distance',
    },
    settings: {
      ...somePack.settings,
      scaleRule: scenario.rule,
      tapLeadMs: { glass: HABITS.leadMs, wired: 0 },
      tapLeadSigmaMs: { glass: 50, wired: 50 },
      tapScatterMs: HABITS.scatterMs,
    },
  };
}
