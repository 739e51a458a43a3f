import { HeldKey } from './held-key.tsx';
import { useRunSettings } from './run-context.ts';

/** Red flag. In the frame's upper corner, far from the one button, and within reach while the car still rolls. */
export function StopKey() {
  const { session } = useRunSettings();
  return (
    <HeldKey disabled={session.role === 'reader'} act={() => session.act({ type: 'run-stopped.v1' })}>
      Stopped
    </HeldKey>
  );
}
