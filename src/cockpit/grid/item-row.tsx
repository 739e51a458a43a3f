import type { ReactNode } from 'react';
import { Icon } from '#src/components/icon.tsx';
import type { GridItem } from './grid-item.ts';

export interface ItemAct {
  readonly words: string;
  readonly run: () => void;
}

interface ItemRowProps {
  readonly name: string;
  readonly item: GridItem;
  readonly acts?: readonly ItemAct[];
  /** Instead of the words, where they follow the feed. */
  readonly live?: ReactNode;
}

/** One thing that must be ready: quiet with a tick when it is, in ink with the fault sign and its act when it is not. */
export function ItemRow({ name, item, acts = [], live }: ItemRowProps) {
  return (
    <div className="grid-item" data-ready={item.ready}>
      <Icon name={item.ready ? 'ready' : 'fault'} />
      <span className="grid-name quiet">{name}</span>
      <span className="grid-words">
        {item.ready ? null : <span className="spoken-only">missing: </span>}
        {live ?? item.words}
      </span>
      {acts.map((act) => (
        <button key={act.words} type="button" className="key" onClick={act.run}>
          {act.words}
        </button>
      ))}
    </div>
  );
}
