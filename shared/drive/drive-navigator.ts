import type { Pack } from '#shared/course/pack.ts';
import type { TapV1, Unnumbered } from '#shared/journal/observation.ts';
import type { DrivePlace } from './drive-course.ts';
import { createRandom, type Random } from './random.ts';

/** The navigator's touches: late or early by a habit, scattered, sometimes forgotten, sometimes wrong. */
export interface NavigatorHabits {
  /** Mean of touch less passing, ms; negative anticipates. */
  readonly leadMs: number;
  /** One standard deviation around it, ms. */
  readonly scatterMs: number;
  /** Correlation of any two touches' scatter within a drive: 0 none, 1 all alike. */
  readonly alike: number;
  /** Share of touches whose scatter is three times that of the others; `scatterMs` stays that of all. */
  readonly wild: number;
  /** Share of places with no touch. */
  readonly missed: number;
  /** Share of touches that are 3 s late or at a wrong place. */
  readonly mistaken: number;
  /** So many touches of the drive, at random places, are so for certain. */
  readonly mistakes: number;
  /** Checkpoints whose touch is so for certain. */
  readonly mistakenAt: readonly string[];
}

export type Tap = Unnumbered<TapV1>;

export interface DriveNavigator {
  /** Places whose passing leads to a touch, with the distance of the nose at which this navigator sees them. */
  readonly targets: readonly { readonly checkpoint: string; readonly at: number }[];
  /** Of those, the touches that are 3 s late or at a wrong place. */
  readonly mistaken: ReadonlySet<string>;
  /** The touch for a target passed at `at` (session microseconds). */
  tap(checkpoint: string, at: number): Tap;
}

/** Nobody anticipates by more than the model runs ahead of what it gives out. */
const EARLIEST_US = -900_000;
const LATE_MISTAKE_US = 3e6;
const WRONG_PLACE = { low: 200, high: 1500 };
const LEAD_SIGMA_MS = 50;
const WILD = 3;
const TOUCHED: ReadonlySet<string> = new Set(['settle', 'scale', 'place']);

/** A navigator whose lead the pack knows to 50 ms. */
export function usualHabits(pack: Pack, seed: number): NavigatorHabits {
  const { tapLeadMs, tapScatterMs } = pack.settings;
  return {
    leadMs: tapLeadMs.glass + createRandom(seed, 'lead').gauss(LEAD_SIGMA_MS),
    scatterMs: tapScatterMs,
    alike: 0,
    wild: 0,
    missed: 0.05,
    mistaken: 0,
    mistakes: 0,
    mistakenAt: [],
  };
}

/** @param seatM metres of the navigator's sight line behind the nose, which is what passes a place */
export function createDriveNavigator(places: readonly DrivePlace[], habits: NavigatorHabits, seed: number, seatM: number): DriveNavigator {
  const random = createRandom(seed, 'navigator');
  const touched = places.filter(({ checkpoint }) => TOUCHED.has(checkpoint.duty));
  const forCertain = new Set([...habits.mistakenAt, ...drawSome(touched, habits.mistakes, createRandom(seed, 'mistakes'))]);
  const late = new Set<string>();
  const mistaken = new Set<string>();
  const targets = touched
    .filter(({ checkpoint }) => random.unit() >= habits.missed || forCertain.has(checkpoint.id))
    .map(({ checkpoint, at }) => {
      const isMistaken = random.unit() < habits.mistaken || forCertain.has(checkpoint.id);
      const wrongPlace = isMistaken && random.unit() < 0.5;
      if (isMistaken) mistaken.add(checkpoint.id);
      if (isMistaken && !wrongPlace) late.add(checkpoint.id);
      const off = wrongPlace ? random.range(WRONG_PLACE.low, WRONG_PLACE.high) * (random.unit() < 0.5 ? -1 : 1) : 0;
      return { checkpoint: checkpoint.id, at: at + off + seatM };
    });
  const scatter = createScatter(habits, random, seed);
  return {
    targets,
    mistaken,
    tap(checkpoint, at) {
      const after = Math.max(EARLIEST_US, (habits.leadMs + scatter()) * 1000) + (late.has(checkpoint) ? LATE_MISTAKE_US : 0);
      return { type: 'tap.v1', at: Math.round(at + after), input: 'glass', checkpoint };
    },
  };
}

function drawSome(places: readonly DrivePlace[], count: number, random: Random): string[] {
  const left = places.map(({ checkpoint }) => checkpoint.id);
  return Array.from({ length: Math.min(count, left.length) }, () => left.splice(Math.floor(random.unit() * left.length), 1)[0] as string);
}

/** Milliseconds around the habit, touch by touch. */
function createScatter({ scatterMs, alike, wild }: NavigatorHabits, random: Random, seed: number): () => number {
  const common = Math.sqrt(alike) * createRandom(seed, 'common scatter').gauss(scatterMs);
  const own = Math.sqrt(1 - alike);
  const tails = createRandom(seed, 'wild touches');
  const tame = 1 / Math.sqrt(1 - wild + wild * WILD * WILD);
  return () => common + own * random.gauss(scatterMs) * tame * (tails.unit() < wild ? WILD : 1);
}
