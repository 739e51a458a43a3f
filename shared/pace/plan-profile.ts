import { type CarLimits, type Evaluation, type Piece, pieceMotion, type Standing } from '#shared/pace/plan-solver.ts';
import { type Metres, type MetresPerSecond, metres, metresPerSecond } from '#shared/units.ts';

/** The motion that a solved plan asks for, place by place. */

/** A stretch under one limit: a zone, or the road between zones; a section's edge cuts too where averages are followed. */
export interface PlannedStretch {
  readonly to: Metres;
  /** Highest speed here by zone and cap, m/s. */
  readonly top: MetresPerSecond;
  /** Lowest speed of the class here, m/s; 0 for none. */
  readonly floor: number;
  /** The steady speed to hold here once ramps are done. */
  readonly hold: MetresPerSecond;
  /** Where braking for what follows begins; null where nothing slower follows. */
  readonly brakingFrom: Metres | null;
}

interface Phase {
  readonly x: number;
  readonly t: number;
  readonly v: number;
  /** m/s²: positive speeding up, negative braking. */
  readonly a: number;
  readonly stretch: PlannedStretch;
}

/** Index `i` of the solved pieces as a stretch; the first begins at `begin`. */
export function stretchOf(piece: Piece, begin: number, v0: number, v1: number, limit: number, car: CarLimits): PlannedStretch {
  const motion = pieceMotion(piece.to - begin, v0, v1, limit, car);
  const brakes = motion.peak > v1 + 1e-9;
  return {
    to: metres(piece.to),
    top: metresPerSecond(piece.top),
    floor: piece.floor,
    hold: metresPerSecond(limit),
    brakingFrom: brakes ? metres(begin + motion.rampIn + motion.cruise) : null,
  };
}

/** Phases of constant acceleration, in order. A class, not closures: a plan has many readers. */
export class Profile {
  private readonly phases: Phase[] = [];
  private readonly finish: Phase;
  /** The car is too fast for a limit ahead and no braking helps. */
  readonly cannotBrake: boolean;

  /** @param t Seconds since the time started, where the plan begins. */
  constructor(pieces: readonly Piece[], car: CarLimits, from: Standing, t: number, { nodes, limits }: Evaluation) {
    let begins = t;
    let begin = from.x;
    let cannotBrake = false;
    for (let i = from.first; i < pieces.length; i++) {
      const piece = pieces[i] as Piece;
      const [v0, v1] = [nodes[i] as number, nodes[i + 1] as number];
      if (v0 > piece.top + 1e-9) cannotBrake = true;
      begins = this.add(piece, begin, v0, v1, limits[i] as number, car, begins);
      begin = piece.to;
    }
    this.cannotBrake = cannotBrake;
    const last = this.phases[this.phases.length - 1] as Phase;
    this.finish = { x: last.stretch.to, t: begins, v: nodes[pieces.length] as number, a: 0, stretch: last.stretch };
  }

  /** The phases of one piece: ramp, steady, ramp down. Lengths of zero are left out. Returns when the piece ends. */
  private add(piece: Piece, begin: number, v0: number, v1: number, limit: number, car: CarLimits, t: number): number {
    const { peak, rampIn, cruise } = pieceMotion(piece.to - begin, v0, v1, limit, car);
    const stretch = stretchOf(piece, begin, v0, v1, limit, car);
    const ramp = v0 > peak ? -car.deceleration : car.acceleration;
    const cruiseX = begin + rampIn;
    const cruiseT = t + Math.abs(peak - v0) / Math.abs(ramp);
    const brakeX = cruiseX + cruise;
    const brakeT = cruiseT + (cruise > 0 ? cruise / peak : 0);
    if (rampIn > 0) this.phases.push({ x: begin, t, v: v0, a: ramp, stretch });
    if (cruise > 0) this.phases.push({ x: cruiseX, t: cruiseT, v: peak, a: 0, stretch });
    if (piece.to - brakeX > 0) this.phases.push({ x: brakeX, t: brakeT, v: peak, a: -car.deceleration, stretch });
    return brakeT + (peak - v1) / car.deceleration;
  }

  private phaseAt(x: number): Phase {
    if (x >= this.finish.x) return this.finish;
    let [low, high] = [0, this.phases.length - 1];
    while (low < high) {
      const middle = (low + high + 1) >> 1;
      if ((this.phases[middle] as Phase).x <= x) low = middle;
      else high = middle - 1;
    }
    return this.phases[low] as Phase;
  }

  speedAt(x: number): number {
    return speedIn(this.phaseAt(x), x);
  }

  /** Before its beginning a plan stands where it begins; one begun at speed goes back along its own line. */
  timeAt(x: number): number {
    const phase = this.phaseAt(x);
    if (x < phase.x && phase.v > 0) return phase.t - (phase.x - x) / phase.v;
    const way = Math.max(0, x - phase.x);
    if (way === 0 || phase === this.finish) return phase.t;
    // 2·way/(v0+v1) holds for steady and uniformly changing speed alike, and does not cancel near a = 0
    return phase.t + (2 * way) / (phase.v + speedIn(phase, x));
  }

  stretchAt(x: number): PlannedStretch {
    return this.phaseAt(x).stretch;
  }
}

const speedIn = (phase: Phase, x: number): number => Math.sqrt(Math.max(0, phase.v * phase.v + 2 * phase.a * Math.max(0, x - phase.x)));
