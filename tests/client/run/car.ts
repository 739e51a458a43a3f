import type { Pack } from '#shared/course/pack.ts';
import { createDrive, type Drive } from '#shared/drive/drive-model.ts';
import { createRandom } from '#shared/drive/random.ts';
import type { NewObservation } from '#shared/journal/observation.ts';
import { ok } from '#shared/result.ts';
import { micros } from '#shared/units.ts';
import type { RunSession } from '#src/run/run-session-contract.ts';
import type { SensorSource } from '#src/sensors/sensor-source.ts';
import type { WindowOf, World } from './world.ts';

/**
 * A car that drives on whatever becomes of the windows, its pulse box on a cable. What arrives while nobody listens is lost,
 * as with a real box; a line takes 1 to 6 ms to arrive, and the sensors stamp it with the listening window's clock.
 */
export class Car {
  private readonly drive: Drive;
  private readonly began: number;
  private aheadMs = 0;
  private readonly way = createRandom(11, 'way of a line');
  readonly touches: { readonly trueAt: number; readonly checkpoint: string | null }[] = [];

  /** @param releaseAfterMs From now to the release. */
  constructor(
    private readonly world: World,
    pack: Pack,
    seed: number,
    releaseAfterMs: number,
    /** On the course already, with a box that reads so. */
    resume?: { readonly distance: number; readonly speed: number; readonly count: number; readonly boxUs: number },
  ) {
    this.began = world.now();
    const start = resume === undefined ? {} : { resume };
    this.drive = createDrive({ pack, seed, releaseAt: releaseAfterMs * 1000, navigator: {}, ...start });
  }

  /** The source as a window has it. `tap`: also hands the navigator's touches (lead and scatter included) to the window. */
  source(window: WindowOf, session: () => RunSession, originMs: number, tap = true): SensorSource {
    let stop: (() => void) | null = null;
    return {
      name: 'serial',
      open: async (listener) => {
        this.drive.advance(this.trueNow(), null);
        listener.status({ state: 'live', goodLines: 0, garbledLines: 0, failure: null });
        stop = this.world.addTimer(window, 50, 50, () => {
          const { sensed, touched } = this.arrived(session(), originMs);
          if (sensed.length > 0) listener.observed(sensed);
          for (const { checkpoint, stamp } of tap ? touched : []) session().act({ type: 'tap.v1', input: 'glass', checkpoint }, stamp);
        });
        return ok(undefined);
      },
      close: async () => {
        stop?.();
        stop = null;
      },
    };
  }

  truth(): { readonly distance: number; readonly speed: number } {
    return this.drive.truth(this.trueNow());
  }

  /** The car and its box go on for so long while the tablet's clocks stand still. */
  driveOn(ms: number): void {
    this.aheadMs += ms;
  }

  private trueNow(): number {
    return (this.world.now() - this.began + this.aheadMs) * 1000;
  }

  private arrived(session: RunSession, originMs: number) {
    const stampOf = (trueAt: number): number => this.began + trueAt / 1000 - this.aheadMs - originMs;
    const sensed: NewObservation[] = [];
    const touched: { readonly checkpoint: string | null; readonly stamp: number }[] = [];
    for (const o of this.drive.advance(this.trueNow(), null)) {
      if (o.type === 'tap.v1') {
        this.touches.push({ trueAt: o.at, checkpoint: o.checkpoint });
        touched.push({ checkpoint: o.checkpoint, stamp: stampOf(o.at) });
      } else {
        sensed.push({ ...o, at: micros(session.clock.at(stampOf(o.at)) + 1000 + 5000 * this.way.unit()) });
      }
    }
    return { sensed, touched };
  }
}
