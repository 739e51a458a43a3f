import type { StoredRunSummary } from '#src/storage/journal-store.ts';
import { Icon, type IconName } from './icon.tsx';

const SIGN: Readonly<Record<StoredRunSummary['upload'], IconName>> = {
  'on this device': 'missing',
  sending: 'missing',
  'safe on server': 'ready',
  blocked: 'fault',
};

/** Where a journal is, in the only words used for it. */
export function JournalState({ state }: { readonly state: StoredRunSummary['upload'] }) {
  return (
    <span className="inline-flex items-center gap-2 align-bottom">
      <Icon name={SIGN[state]} className={state === 'blocked' ? 'text-fault size-5' : 'size-5'} />
      {state === 'blocked' ? 'on this device, sending is blocked' : state}
    </span>
  );
}
