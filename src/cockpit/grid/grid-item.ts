import { formatDuration } from '#shared/course/format.ts';
import type { Readout } from '#shared/pace/readout.ts';
import type { WakeState } from '#src/cockpit/devices/wake-lock.ts';
import type { RunStatus } from '#src/run/run-session-contract.ts';
import type { PersistenceFacts } from '#src/storage/persistence.ts';

/** What must be ready before the start. Only what is missing stands out. */
export interface GridItem {
  readonly ready: boolean;
  readonly words: string;
}

/** Beyond these the clock is not called checked: a twentieth of a second at two sigma, and an hour without a look. */
const CLOCK_SIGMA_S = 0.025;
const CLOCK_AGE_S = 3600;
/** Room for ten runs of an hour: less and no run should start here. */
const ROOM_HOURS = 10;

const CLOCK_WORDS: Readonly<Record<string, string>> = {
  exchange: 'server',
  nmea: 'receiver',
  pps: 'receiver’s second',
  tap: 'touch',
};

export function clockItem({ official, warnings }: Pick<Readout, 'official' | 'warnings'>): GridItem {
  if (official === null) return { ready: false, words: 'not checked against the official clock' };
  const doubted = warnings.some(({ code }) => code === 'clock-disagrees') ? 'clocks disagree; ' : '';
  const ready = doubted === '' && official.sigma <= CLOCK_SIGMA_S && official.age <= CLOCK_AGE_S && official.source !== 'wall';
  const source = official.source === 'wall' ? 'only this tablet’s own clock' : `by ${CLOCK_WORDS[official.source] ?? official.source}`;
  return { ready, words: `${doubted}${source}, ±${Math.ceil(official.sigma * 2000)} ms, ${formatDuration(Math.floor(official.age))} ago` };
}

export function sensorItem(status: RunStatus['sensor']): GridItem {
  if (status === null || status.state === 'closed') return { ready: false, words: 'nothing connected' };
  const counts = `${status.goodLines} good, ${status.garbledLines} garbled`;
  switch (status.state) {
    case 'live':
      return { ready: true, words: `${status.name}, ${counts}` };
    case 'opening':
      return { ready: false, words: `${status.name}, opening` };
    case 'silent':
      return { ready: false, words: `${status.name} is silent, ${counts}` };
    case 'lost':
      return { ready: false, words: status.failure?.message ?? `${status.name} is lost` };
  }
}

export function storageItem(facts: PersistenceFacts, storage: RunStatus['storage']): GridItem {
  if (storage.state === 'failing') return { ready: false, words: storage.message ?? 'the journal cannot be written' };
  if (facts.freeHours === null) return { ready: false, words: 'room not known' };
  const hours = Math.floor(facts.freeHours);
  if (hours < ROOM_HOURS) return { ready: false, words: `room for ${hours} h only: make room on the tablet` };
  const room = hours > 99 ? 'room for over 99 h' : `room for ${hours} h`;
  const recovered = storage.recovered === 'mirror' ? ', recovered from its mirror' : '';
  return { ready: facts.persisted, words: `${facts.persisted ? 'kept' : 'the browser may clear it'}, ${room}${recovered}` };
}

export function wakeItem(wake: WakeState): GridItem {
  if (wake === 'on') return { ready: true, words: 'stays on' };
  return {
    ready: false,
    words: wake === 'unsupported' ? 'may sleep: set it to never in the tablet’s settings' : 'may sleep: touch the screen',
  };
}

export function buttonItem(lastTap: Readout['lastTap']): GridItem {
  return lastTap === null ? { ready: false, words: 'press it once, on glass or glove' } : { ready: true, words: 'button good' };
}
