import { describe, expect, it, vi } from 'vitest';
import type { Readout } from '#shared/pace/readout.ts';
import { createLiveModel } from '#src/cockpit/live/live-model.ts';
import { Rig } from '#tests/client/run/rig.ts';

/** Frames and the session's notice in the test's hands; readouts are the engine's, figures moved on from there. */
async function loop() {
  const rig = new Rig(600_000);
  const { session } = await rig.open('open or new');
  let readout: Readout = session.readout();
  let frame: FrameRequestCallback = () => undefined;
  vi.stubGlobal('requestAnimationFrame', (callback: FrameRequestCallback) => {
    frame = callback;
    return 1;
  });
  vi.stubGlobal('cancelAnimationFrame', () => undefined);
  let notice = (): void => undefined;
  const model = createLiveModel({
    readout: () => readout,
    subscribe: (listener) => {
      notice = listener;
      return () => undefined;
    },
  });
  const stop = model.start();
  return {
    model,
    notice: () => notice(),
    show: (change: Partial<Readout>, time: number) => {
      readout = { ...readout, ...change };
      frame(time);
    },
    stop: () => {
      stop();
      vi.unstubAllGlobals();
    },
  };
}

describe('live loop', () => {
  it('calls every-frame painters each frame and figure painters about twelve times a second', async () => {
    const { model, show, stop } = await loop();
    const [heights, figures] = [vi.fn(), vi.fn()];
    model.addPainter(heights, 'every frame');
    model.addPainter(figures, 'figures');
    expect([heights, figures].map((painter) => painter.mock.calls.length)).toEqual([1, 1]);
    for (let i = 1; i <= 60; i++) show({ distance: i as Readout['distance'] }, (i * 1000) / 60);
    expect(heights).toHaveBeenCalledTimes(61);
    expect(figures.mock.calls.length).toBeGreaterThanOrEqual(11);
    expect(figures.mock.calls.length).toBeLessThanOrEqual(14);
    stop();
  });

  it('tells React of structure and of the session’s notices, never of figures, and then paints figures at once', async () => {
    const { model, show, notice, stop } = await loop();
    const [told, figures] = [vi.fn(), vi.fn()];
    model.subscribe(told);
    show({}, 0);
    model.addPainter(figures, 'figures');
    show({ distance: 5 as Readout['distance'] }, 16);
    expect(told).not.toHaveBeenCalled();
    expect(figures).toHaveBeenCalledTimes(1);
    show({ phase: 'countdown' }, 33);
    expect(told).toHaveBeenCalledTimes(1);
    expect(figures).toHaveBeenCalledTimes(2);
    expect(model.structure().phase).toBe('countdown');
    notice();
    show({}, 50);
    expect(told).toHaveBeenCalledTimes(2);
    stop();
  });

  it('calls a released painter no more', async () => {
    const { model, show, stop } = await loop();
    const painter = vi.fn();
    const release = model.addPainter(painter, 'every frame');
    release();
    show({}, 16);
    expect(painter).toHaveBeenCalledTimes(1);
    stop();
  });
});
