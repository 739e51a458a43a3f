import '#src/cockpit/run/run.css';
import '#src/cockpit/run/tap.css';
import '#src/cockpit/keys.css';
import './grid.css';
import { useState } from 'react';
import { useStructure } from '#src/cockpit/live/use-live.ts';
import { CheckpointButton } from '#src/cockpit/run/checkpoint-button.tsx';
import { Cautions } from '#src/components/cautions.tsx';
import { GridItems } from './grid-items.tsx';
import { GridSettings, type Setting } from './grid-settings.tsx';
import { LimitEntry } from './limit-entry.tsx';
import { LineEntry } from './line-entry.tsx';
import { ReleaseEntry } from './release-entry.tsx';
import { StagedEntry } from './staged-entry.tsx';
import { TargetEntry } from './target-entry.tsx';
import { TouchClock } from './touch-clock.tsx';

const TRY_IT = { name: 'try the button', words: 'on glass, or with the glove' } as const;
const TRIED = { name: 'button good', words: 'try again as you like' } as const;

/** Before the start: what is missing stands out, and whatever a bulletin changes can be typed in with no signal. */
export function GridCheck({ side }: { readonly side: 'left' | 'right' }) {
  const [setting, setSetting] = useState<Setting | null>(null);
  const { lastTap } = useStructure();
  const done = (): void => setSetting(null);
  if (setting !== null) return <SettingEntry setting={setting} done={done} />;
  return (
    <main className="run grid-check" data-side={side}>
      <div className="grid-left">
        <GridItems touchClock={() => setSetting('clock')} />
        <Cautions className="grid-cautions" />
      </div>
      <GridSettings change={setSetting} />
      <CheckpointButton trial={lastTap === null ? TRY_IT : TRIED} />
    </main>
  );
}

function SettingEntry({ setting, done }: { readonly setting: Setting; readonly done: () => void }) {
  switch (setting) {
    case 'release':
      return <ReleaseEntry done={done} />;
    case 'target':
      return <TargetEntry done={done} />;
    case 'staged':
      return <StagedEntry done={done} />;
    case 'limit':
      return <LimitEntry done={done} />;
    case 'line':
      return <LineEntry done={done} />;
    case 'clock':
      return <TouchClock done={done} />;
  }
}
