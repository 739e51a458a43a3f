import './run.css';
import './band.css';
import './tap.css';
import '#src/cockpit/keys.css';
import { Band } from './band.tsx';
import { CheckpointButton } from './checkpoint-button.tsx';
import { CheckpointPanel } from './checkpoint-panel.tsx';
import { CourseStrip } from './course-strip.tsx';

/** Under way: band over strip for the driver, next place over the one button for the navigator's side of the glass. */
export function RunScreen({ side }: { readonly side: 'left' | 'right' }) {
  return (
    <main className="run" data-side={side}>
      <Band />
      <CheckpointPanel />
      <CourseStrip />
      <CheckpointButton />
    </main>
  );
}
