/**
 * What a simulated drive is drawn from, as data: sizes as in simulations of long closed-road runs, own judgement, no source.
 * Fractions are of the wheel scale (0.0035 = 0.35 %), lengths in metres, times in seconds.
 */
export interface DriveParameters {
  readonly tyre: TyreParameters;
  /** Official over driven metres, as a logarithm: one value for the run, and one that wanders along the road. */
  readonly line: { readonly sigma: number; readonly wanderSigma: number; readonly spanM: number };
  /** Metres the wheel turns too far or too little, now and then. */
  readonly slips: Occasional & { readonly overS: number };
  /** Single pulses that are lost, now and then; only where the faults say so. */
  readonly dropouts: Occasional;
  /** Stretches of time in which every pulse is lost: so many on the course, this long. */
  readonly losses: { readonly count: number; readonly low: number; readonly high: number };
  /** A driven wheel: slip at `TYPICAL_SPEED` (it grows with the square of speed), and metres spun at the launch. */
  readonly driven: { readonly slip: number; readonly spin: Range };
  /** One sigma of the survey at every printed place, the finish among them. */
  readonly surveySigma: number;
  readonly gnss: GnssParameters;
}

export interface TyreParameters {
  /** Pack scale against the tyre's own when cold and slow: what is certain of it, and one sigma; null sigma: as the pack says. */
  readonly offset: number;
  readonly sigma: number | null;
  /** Growth of the warm tyre, and how it comes about: shares of it, each with a time constant drawn from a range. */
  readonly heat: { readonly mean: number; readonly sigma: number; readonly parts: readonly (HeatPart & Range)[] };
  /** Time constant of cooling while parked. */
  readonly coolS: number;
  /** Growth at `TYPICAL_SPEED`; it goes with the square of speed. */
  readonly speedGrowth: Range;
  /** Random walk: one sigma after one metre. */
  readonly driftPerRootMetre: number;
}

export interface HeatPart {
  readonly share: number;
}

export interface GnssParameters {
  /** From the measurement to its arrival. */
  readonly latencyUs: { readonly fixed: number; readonly jitter: number };
  readonly speed: Noise;
  /** Each axis. */
  readonly position: Noise;
  readonly outages: Range & { readonly everyS: number };
  /** One long outage in every drive, seconds; 0 for none. */
  readonly longOutageS: number;
}

export interface Range {
  readonly low: number;
  readonly high: number;
}

/** Once in so many metres on average, this much. */
export interface Occasional extends Range {
  readonly everyM: number;
}

/** One sigma of what changes from fix to fix, and of what wanders over a span. */
export interface Noise {
  readonly white: number;
  readonly slow: number;
  readonly spanS: number;
}

/** Speed at which growth and slip by speed are stated, m/s. */
export const TYPICAL_SPEED = 50;

export const USUAL_PARAMETERS: DriveParameters = {
  tyre: {
    offset: 0,
    sigma: null,
    heat: { mean: 0.0035, sigma: 0.001, parts: [{ share: 1, low: 250, high: 600 }] },
    coolS: 600,
    speedGrowth: { low: 0.0005, high: 0.002 },
    // 0.03 % over 30 km
    driftPerRootMetre: 0.0003 / Math.sqrt(30_000),
  },
  line: { sigma: 0.001, wanderSigma: 0.0002, spanM: 5000 },
  slips: { everyM: 10_000, low: 0.3, high: 3, overS: 1 },
  dropouts: { everyM: 15_000, low: 1, high: 6 },
  losses: { count: 0, low: 0.3, high: 1 },
  driven: { slip: 0.008, spin: { low: 5, high: 20 } },
  surveySigma: 2,
  gnss: {
    latencyUs: { fixed: 150_000, jitter: 30_000 },
    speed: { white: 0.08, slow: 0.01, spanS: 60 },
    position: { white: 1, slow: 3, spanS: 120 },
    outages: { everyS: 300, low: 3, high: 20 },
    longOutageS: 0,
  },
};

/** How often the world moves on and its sensors speak, microseconds. */
export interface DriveRates {
  /** Length of a tick. */
  readonly tick: number;
  /** Length of a tick where much happens: the launch, braking, and about a stretch of lost pulses. `tick` is a multiple of it. */
  readonly fineTick: number;
  /** Records of the pulse box; where much happens it speaks at every fine tick. */
  readonly pulse: number;
  readonly fix: number;
}

/** As the pulse box and a receiver really speak. */
export const REAL_RATES: DriveRates = { tick: 20_000, fineTick: 20_000, pulse: 20_000, fix: 200_000 };
