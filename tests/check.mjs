import { main } from '#server/setup/main.mjs';
import { ensurePackages } from '#server/setup/packages.mjs';
import { ROOT } from '#server/setup/root.mjs';
import { runSteps } from '#tests/setup/run-steps.mjs';
import { CHECK_STEPS } from '#tests/setup/steps.mjs';

/** `npm run check`: types, lint and unit tests; no database, no browser. */
await main(async ({ signal }) => {
  await ensurePackages(ROOT, signal);
  await runSteps(CHECK_STEPS, signal);
});
