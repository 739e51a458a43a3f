import type { Journalled } from '#shared/journal/block.ts';
import type { SessionClock } from './clock.ts';
import type { RunChannel } from './run-environment.ts';
import type { PublishedStatus, RunMessage } from './run-messages.ts';

/** The writer's side of the channel. Silent until another window says hello. */
export interface RunPublisher {
  observed(observations: readonly Journalled[]): void;
  status(status: PublishedStatus): void;
  close(): void;
}

interface Published {
  readonly clock: SessionClock;
  uncommitted(): readonly Journalled[];
  committed(): number;
  status(): PublishedStatus;
}

export function createRunPublisher(channel: RunChannel, { clock, uncommitted, committed, status }: Published): RunPublisher {
  let followed = false;
  const say = (message: RunMessage): void => channel.postMessage(message);
  channel.onmessage = ({ data }: MessageEvent<RunMessage>) => {
    if (data.type === 'ask') say({ type: 'reading', id: data.id, at: clock.now() });
    if (data.type !== 'hello') return;
    followed = true;
    say({ type: 'observed', observations: uncommitted(), committed: committed() });
    say({ type: 'status', status: status() });
  };
  return {
    observed: (observations) => {
      if (followed) say({ type: 'observed', observations, committed: committed() });
    },
    status: (now) => {
      if (followed) say({ type: 'status', status: now });
    },
    close: () => channel.close(),
  };
}
