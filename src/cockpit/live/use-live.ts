import { createContext, use, useEffect, useLayoutEffect, useRef, useSyncExternalStore } from 'react';
import type { Readout } from '#shared/pace/readout.ts';
import type { LiveModel, Pace, Painter } from './live-model.ts';

export const LiveContext = createContext<LiveModel | null>(null);

export function useLiveModel(): LiveModel {
  const model = use(LiveContext);
  if (model === null) throw new Error('live figures need a LiveContext around them');
  return model;
}

/** The readout as it stood when the structure of the screen last changed. Never read live figures from it. */
export function useStructure(): Readout {
  const model = useLiveModel();
  return useSyncExternalStore(model.subscribe, model.structure);
}

/** Calls `paint` at its pace while mounted; the newest closure is used, and the first call is before the first paint. */
export function usePainter(pace: Pace, paint: Painter): void {
  const model = useLiveModel();
  const newest = useRef(paint);
  useLayoutEffect(() => {
    newest.current = paint;
  });
  useLayoutEffect(() => model.addPainter((readout) => newest.current(readout), pace), [model, pace]);
}

export function useLiveLoop(model: LiveModel): void {
  useEffect(() => model.start(), [model]);
}
