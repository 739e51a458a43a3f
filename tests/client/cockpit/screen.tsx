import { act, type RenderResult, render } from '@testing-library/react';
import { Profiler, type ReactNode } from 'react';
import type { Pack } from '#shared/course/pack.ts';
import { createLiveModel, type LiveModel } from '#src/cockpit/live/live-model.ts';
import { LiveContext } from '#src/cockpit/live/use-live.ts';
import { RunContext } from '#src/cockpit/run/run-context.ts';
import { Car } from '#tests/client/run/car.ts';
import { type OpenedWindow, Rig } from '#tests/client/run/rig.ts';
import { must } from '#tests/client/storage/device.ts';

/** A screen over a real run: engine, journal and storage are the application's own; time and frames are the test's. */
export interface Screen extends RenderResult {
  readonly rig: Rig;
  readonly opened: OpenedWindow;
  /** React commits so far. */
  commits(): number;
  /** Lets time pass on the device and then paints one frame. */
  pass(ms: number): Promise<void>;
  frame(): void;
}

interface Wanted {
  readonly screen: ReactNode;
  /** From the opening of the run to its release. */
  readonly releaseInMs?: number;
  /** Driven before the screen is drawn; nobody drives where it is left out. */
  readonly drivenS?: number;
  readonly change?: (pack: Pack) => Pack;
  /** False: the simulated navigator keeps the hands still. */
  readonly tap?: boolean;
  /** Draws what a second window shows. */
  readonly asReader?: boolean;
}

export async function drawScreen({ screen, releaseInMs = 20_000, drivenS, change, tap = true, asReader = false }: Wanted): Promise<Screen> {
  const rig = new Rig(releaseInMs, change);
  const writer = await rig.open('open or new');
  if (drivenS !== undefined) {
    const car = new Car(rig.world, rig.pack, 3, releaseInMs);
    must(
      await writer.session.attach(
        car.source(writer.window, () => writer.session, writer.originMs, tap),
        { ask: true },
      ),
    );
    await rig.world.pass(drivenS * 1000);
  }
  const opened = asReader ? await rig.open({ runId: writer.session.header.runId }) : writer;
  const frames = handDrivenFrames();
  const model = createLiveModel(opened.session);
  let commits = 0;
  const drawn = render(
    <Profiler id="screen" onRender={() => void commits++}>
      {around(opened, model, screen)}
    </Profiler>,
  );
  const release = frames.run(() => model.start());
  const frame = (): void => act(() => frames.paint());
  frame();
  return {
    ...drawn,
    rig,
    opened,
    commits: () => commits,
    frame,
    pass: async (ms) => {
      await act(() => rig.world.pass(ms));
      frame();
    },
    unmount: () => {
      release();
      drawn.unmount();
    },
  };
}

function around({ session }: OpenedWindow, model: LiveModel, screen: ReactNode): ReactNode {
  const { pack } = session.header;
  const settings = { session, speedUnit: pack.settings.speedUnit, distanceUnit: pack.courseBook.unit, timeZone: pack.event.timeZone };
  return (
    <RunContext value={settings}>
      <LiveContext value={model}>{screen}</LiveContext>
    </RunContext>
  );
}

/** Frames come when the test says so: the loop's own request is kept and called. */
function handDrivenFrames(): { run<T>(start: () => T): T; paint(): void } {
  let due: FrameRequestCallback | null = null;
  let time = 0;
  const patched = (callback: FrameRequestCallback): number => {
    due = callback;
    return 1;
  };
  const withPatch = <T,>(work: () => T): T => {
    const original = globalThis.requestAnimationFrame;
    globalThis.requestAnimationFrame = patched;
    try {
      return work();
    } finally {
      globalThis.requestAnimationFrame = original;
    }
  };
  return {
    run: withPatch,
    paint: () => {
      const call = due;
      due = null;
      time += 100;
      withPatch(() => call?.(time));
    },
  };
}

/** A pointer on the glass, stamped as the browser stamps it. */
export function pointerDown(element: Element, timeStamp: number): void {
  const event = new PointerEvent('pointerdown', { bubbles: true, cancelable: true });
  Object.defineProperty(event, 'timeStamp', { value: timeStamp });
  act(() => void element.dispatchEvent(event));
}
