import type { Checkpoint } from '#shared/course/course-book.ts';
import type { Pack } from '#shared/course/pack.ts';
import type { NavigatorHabits } from '#shared/drive/drive-navigator.ts';
import type { DriveFaults } from '#shared/drive/drive-options.ts';
import { type DriveParameters, USUAL_PARAMETERS } from '#shared/drive/drive-parameters.ts';
import { BASE_PACK, checkpoint, FORTY_PACK } from '#tests/unit/drive/base-pack.ts';

/** What is simulated: a course and its pack, what the drives are drawn from, and the navigator. */
export interface Setting {
  readonly title: string;
  readonly pack: Pack;
  readonly parameters: DriveParameters;
  readonly faults: DriveFaults;
  readonly navigator: Partial<NavigatorHabits>;
  /** The navigators' leads, ms: each drive has one of its own. */
  readonly lead: { readonly mean: number; readonly sigma: number };
  /** The surveyed line's distances are wrong by a constant and by one sigma that wanders over a span, metres. */
  readonly geometryOff: { readonly constant: number; readonly sigma: number; readonly spanM: number };
  /** A neutral stretch, driven at a speed of its own, in which the car is held at one place. Metres, seconds, m/s. */
  readonly neutral: {
    readonly from: number;
    readonly to: number;
    readonly speed: number;
    readonly heldAt: number;
    readonly heldS: number;
  } | null;
}

const { tyre, slips, dropouts, gnss } = USUAL_PARAMETERS;
/** Growth by speed in the mean, where it is stated. */
const SPEED_GROWTH = (tyre.speedGrowth.low + tyre.speedGrowth.high) / 2;

/**
 * Tyres whose pack scale was learnt in runs: right in the mean for a warm tyre at the class's speed, one sigma 0.3 %. `off`: a
 * share by which it is wrong beyond that.
 */
const tyres = (heat = 0.0035, drift = tyre.driftPerRootMetre, off = 0, speed = 50): DriveParameters['tyre'] => ({
  ...tyre,
  offset: off - heat - SPEED_GROWTH * (speed / 50) ** 2,
  sigma: 0.003,
  heat: { ...tyre.heat, mean: heat },
  driftPerRootMetre: drift,
});

const BASE_PARAMETERS: DriveParameters = { ...USUAL_PARAMETERS, tyre: tyres() };

/**
 * Told to the engine in every setting: twice what the scale is really off by in most. Nobody knows better before the run, and a
 * setting in which the factor is off by 1 % is not announced.
 */
const TOLD_SCALE_SIGMA = 0.006;

/** Lead told to the engine, ms, and how well it is known; scatter told. */
interface Told {
  readonly lead?: { readonly ms: number; readonly sigmaMs: number | null };
  readonly scatterMs?: number;
  readonly driven?: boolean;
}

function told(pack: Pack, { lead = { ms: 200, sigmaMs: 50 }, scatterMs = 100, driven = false }: Told = {}): Pack {
  const { tapLeadSigmaMs: _, ...settings } = pack.settings;
  const sigma = lead.sigmaMs === null ? {} : { tapLeadSigmaMs: { glass: lead.sigmaMs, wired: lead.sigmaMs } };
  return {
    ...pack,
    car: { ...pack.car, behindNose: { seatM: 2, aerialM: 2 } },
    wheel: { ...pack.wheel, scaleSigma: TOLD_SCALE_SIGMA, scaleSource: 'run', driven },
    settings: { ...settings, ...sigma, tapLeadMs: { glass: lead.ms, wired: lead.ms }, tapScatterMs: scatterMs },
  };
}

const places = (...at: number[]): Checkpoint[] => at.map((km, i) => checkpoint(`place-${km}`, i === 0 ? 'settle' : 'scale', km));

const LONG: Pack = { ...BASE_PACK, ownCheckpoints: places(12, 27, 45, 60, 78, 92, 108) };

/** Survey of 3 m: printed in tens of metres, as such a survey is. */
const coarsely = (c: Checkpoint): Checkpoint => ({ ...c, at: { ...c.at, text: Number(c.at.text).toFixed(2) } });
const COARSE: Pack = {
  ...LONG,
  courseBook: { ...LONG.courseBook, checkpoints: LONG.courseBook.checkpoints.map(coarsely) },
  ownCheckpoints: LONG.ownCheckpoints.map(coarsely),
};

const kmh = (text: string) => ({ text, unit: 'km/h' as const });
const km = (text: string) => ({ text, unit: 'km' as const });

/** 60 km/h on forty kilometres, places every five. */
const SLOW: Pack = {
  ...FORTY_PACK,
  courseBook: { ...FORTY_PACK.courseBook, zones: FORTY_PACK.courseBook.zones.map((zone) => ({ ...zone, limit: kmh('43.2') })) },
  raceClass: {
    ...FORTY_PACK.raceClass,
    targetTimeMs: 2_400_000,
    sections: [{ kind: 'average', to: km('40.000'), average: kmh('60.0') }],
    cap: kmh('72.0'),
  },
  ownCheckpoints: places(5, 10, 15, 20, 25, 30, 35),
};

/** Held for five minutes half-way, in a neutral stretch. */
const HELD: Pack = {
  ...LONG,
  raceClass: {
    ...LONG.raceClass,
    targetTimeMs: 2_730_000,
    sections: [
      { kind: 'average', to: km('63.000'), average: kmh('180.0') },
      { kind: 'neutral', to: km('64.000'), timeMs: 350_000 },
      { kind: 'average', to: km('120.000'), average: kmh('180.0') },
    ],
  },
};

const BASE: Setting = {
  title: 'base',
  pack: told(LONG),
  parameters: BASE_PARAMETERS,
  faults: { dropouts: true, gnssOutages: true },
  navigator: { scatterMs: 100, missed: 0.05 },
  lead: { mean: 200, sigma: 50 },
  geometryOff: { constant: 0, sigma: 0, spanM: 1000 },
  neutral: null,
};

const ROUGH: Setting = {
  ...BASE,
  title: 'rough: driven wheel, slips and dropouts × 5, one pulse loss',
  pack: told(LONG, { driven: true }),
  parameters: {
    ...BASE_PARAMETERS,
    slips: { ...slips, everyM: slips.everyM / 5 },
    dropouts: { ...dropouts, everyM: dropouts.everyM / 5 },
    losses: { count: 1, low: 0.3, high: 1 },
  },
  faults: { ...BASE.faults, driven: true },
};

const HOT = { ...BASE_PARAMETERS, tyre: tyres(0.006, (tyre.driftPerRootMetre * 8) / 3) };

export const SETTINGS = {
  base: BASE,
  scatter50: { ...BASE, title: 'tap scatter .05', pack: told(LONG, { scatterMs: 50 }), navigator: { scatterMs: 50, missed: 0.05 } },
  scatter200: { ...BASE, title: 'tap scatter .20', pack: told(LONG, { scatterMs: 200 }), navigator: { scatterMs: 200, missed: 0.05 } },
  scatter200told100: { ...BASE, title: 'tap scatter .20, told .10', navigator: { scatterMs: 200, missed: 0.05 } },
  survey3: { ...BASE, title: 'survey 3 m', pack: told(COARSE), parameters: { ...BASE_PARAMETERS, surveySigma: 3 } },
  missed30: { ...BASE, title: '30 % missed', navigator: { scatterMs: 100, missed: 0.3 } },
  gross: { ...BASE, title: 'one gross tap in every drive', navigator: { scatterMs: 100, missed: 0.05, mistakes: 1 } },
  factor1: { ...BASE, title: 'factor off 1 %', parameters: { ...BASE_PARAMETERS, tyre: tyres(0.0035, tyre.driftPerRootMetre, 0.01) } },
  hot: { ...BASE, title: 'hot tyres', parameters: HOT },
  rough: ROUGH,
  roughFilled: {
    ...ROUGH,
    title: 'rough, gaps perfectly filled',
    parameters: { ...ROUGH.parameters, losses: { count: 0, low: 0, high: 0 } },
  },
  bare28: { ...BASE, title: 'last 28 km bare', pack: told({ ...LONG, ownCheckpoints: places(12, 27, 45, 60, 78, 92) }) },
  landmark3: { ...BASE, title: 'landmark 3 km out', pack: told({ ...LONG, ownCheckpoints: places(12, 27, 45, 60, 78, 92, 108, 117) }) },
  noLead: { ...BASE, title: 'no lead', pack: told(LONG, { lead: { ms: 0, sigmaMs: null } }) },
  poorGnss: {
    ...BASE,
    title: 'poor GNSS',
    parameters: {
      ...BASE_PARAMETERS,
      gnss: { ...gnss, outages: { ...gnss.outages, everyS: 90 }, longOutageS: 180, position: { ...gnss.position, slow: 6 } },
    },
  },
  km40at40: {
    ...BASE,
    title: '40 km at 40 m/s, 3 places',
    pack: told({ ...FORTY_PACK, ownCheckpoints: places(10, 20, 30) }),
    parameters: { ...BASE_PARAMETERS, tyre: tyres(0.0035, tyre.driftPerRootMetre, 0, 40) },
  },
  km40at17: {
    ...BASE,
    title: '40 km at 16.7 m/s, 5 km legs',
    pack: told(SLOW),
    parameters: { ...BASE_PARAMETERS, tyre: tyres(0.0035, tyre.driftPerRootMetre, 0, 50 / 3) },
  },
  otherTyres: {
    ...BASE,
    title: 'model: tyres warm in two steps, and cool in a stop of 5 min',
    pack: told(HELD),
    parameters: {
      ...BASE_PARAMETERS,
      tyre: {
        ...tyres(0.0045),
        heat: {
          mean: 0.0045,
          sigma: 0.0015,
          parts: [
            { share: 0.5, low: 60, high: 150 },
            { share: 0.5, low: 600, high: 1500 },
          ],
        },
        coolS: 400,
      },
    },
    neutral: { from: 63_000, to: 64_000, speed: 25, heldAt: 63_500, heldS: 300 },
  },
  geometryOff: { ...BASE, title: 'model: surveyed line off by 5 m and 3 m over 1 km', geometryOff: { constant: 5, sigma: 3, spanM: 1000 } },
  alikeTaps: {
    ...BASE,
    title: 'model: tap errors alike within a drive (.7), heavy tails',
    navigator: { scatterMs: 100, missed: 0.05, alike: 0.7, wild: 0.1 },
  },
} satisfies Record<string, Setting>;

/** Settings that differ from base in what GNSS says alone: without GNSS their drives are those of base. */
const OF_GNSS: ReadonlySet<string> = new Set<keyof typeof SETTINGS>(['poorGnss', 'geometryOff']);

export type SettingName = keyof typeof SETTINGS;
export const settingOf = (name: SettingName): Setting => SETTINGS[name];
/** The setting whose drives these are. */
export const worldOf = (name: SettingName, withGnss: boolean): SettingName => (OF_GNSS.has(name) && !withGnss ? 'base' : name);
export const SETTING_NAMES = Object.keys(SETTINGS) as SettingName[];
