import { type Gnss, makeGnss } from '#shared/pace/gnss.ts';
import { type LaunchEvent, type LaunchWatch, makeLaunchWatch } from '#shared/pace/launch.ts';
import { makePulseGap, type PulseGap } from '#shared/pace/pulse-gap.ts';
import { makeSecondWheel, type SecondWheel } from '#shared/pace/second-wheel.ts';
import { makeSourceComparison, type SourceComparison } from '#shared/pace/source-comparison.ts';
import type { SourceNode } from '#shared/pace/source-node.ts';
import { makeSecondLook, type SecondLook } from '#shared/pace/source-nodes.ts';
import { makeTrack, type Track } from '#shared/pace/track.ts';
import { makeWheelChannel, type WheelChannel } from '#shared/pace/wheel.ts';
import { makeWheelDirection, type WheelDirection } from '#shared/pace/wheel-direction.ts';

/**
 * Raw distance from whatever is permitted and alive: the wheel's count first, GNSS where there is no wheel or it fell silent.
 * Knows nothing of checkpoints, scales or taps.
 */
export interface Odometer {
  mode: 'none' | 'wheel' | 'gnss';
  readonly wheel: WheelChannel;
  /** What the measuring wheel's sensor misses. */
  readonly gap: PulseGap;
  readonly second: SecondWheel;
  readonly direction: WheelDirection;
  readonly gnss: Gnss;
  readonly track: Track;
  readonly launches: LaunchWatch;
  /** Raw values of the last knot. */
  w: number;
  g: number;
  /** Last knot by the wheel, and the count that stood there. */
  wheelKnot: { at: number; total: number };
  /** Last record of the source that showed no movement since the last knot. */
  stillAt: number;
  /** Where the wheel was left for GNSS: gMetres is GNSS's own reading there. Null when GNSS has been the source from the start. */
  bridge: { at: number; w: number; g: number; total: number } | null;
  /** Where the wheel's own count last took the place of what GNSS had carried on: counts for metres. */
  handedBack: { at: number; counts: number; metres: number } | null;
  /** GNSS's own reading less `g`, while GNSS is the source. */
  gnssZero: number;
  /** Distance that nothing measured, or only GNSS where the wheel slipped, or that was filled in: instants and one sigma in metres. */
  losses: { at: number; sigma: number; by?: 'slip' | 'fill' }[];
  /** Gaps of the count that were filled, and when last. */
  fills: { count: number; metres: number; at: number | null };
  /** Comparisons with GNSS, in order of instant. */
  sourceNodes: SourceNode[];
  /** Where the comparing stands, and what it taught. */
  readonly secondLook: SecondLook;
  readonly comparison: SourceComparison;
  usedWheel: boolean;
  usedGnssSpeed: boolean;
  usedGnssPosition: boolean;
  bridges: number;
  /** Records of other channels. */
  otherRecords: number;
}

export interface OdometerChange {
  /** The trace grew. */
  readonly traced: boolean;
  readonly launch: LaunchEvent;
  /** Part of the past was told anew (bridged metres became counts). */
  readonly rewritten: { readonly from: number; readonly w: number; readonly g: number; readonly share: number } | null;
  /** A source node was added. */
  readonly node: boolean;
}

export const makeOdometer = (): Odometer => ({
  mode: 'none',
  wheel: makeWheelChannel(),
  gap: makePulseGap(),
  second: makeSecondWheel(),
  direction: makeWheelDirection(),
  gnss: makeGnss(),
  track: makeTrack(),
  launches: makeLaunchWatch(),
  w: 0,
  g: 0,
  wheelKnot: { at: 0, total: 0 },
  stillAt: 0,
  bridge: null,
  handedBack: null,
  gnssZero: 0,
  losses: [],
  fills: { count: 0, metres: 0, at: null },
  sourceNodes: [],
  secondLook: makeSecondLook(),
  comparison: makeSourceComparison(),
  usedWheel: false,
  usedGnssSpeed: false,
  usedGnssPosition: false,
  bridges: 0,
  otherRecords: 0,
});
