import { Shell } from './shell.tsx';

/** Said before anything is recorded: on this browser a run could be lost. */
export function Unsupported({ missing }: { readonly missing: readonly string[] }) {
  return (
    <Shell title="Cockpit">
      <p>
        <strong>This browser cannot run the cockpit.</strong> It lacks {missing.join(', ')}.
      </p>
      <p>
        Use Chrome, Edge or another Chromium from version 122 on, on an Android, Windows or Linux tablet. The paddock works here as it is.
      </p>
      <p>
        <a href="/">to the paddock</a>
      </p>
    </Shell>
  );
}
