import { useState } from 'react';

/** Takes the journal out of the tablet as a file, and says so when it cannot. */
export function ExportKey({ save }: { readonly save: () => Promise<boolean> }) {
  const [failed, setFailed] = useState(false);
  const run = async (): Promise<void> => setFailed(!(await save().catch(() => false)));
  return (
    <button type="button" className="key" onClick={() => void run()}>
      {failed ? 'cannot be read whole, try again' : 'export journal'}
    </button>
  );
}
