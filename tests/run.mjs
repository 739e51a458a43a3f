import { findBinaries } from '#server/postgres/binaries.mjs';
import { main } from '#server/setup/main.mjs';
import { ensurePackages } from '#server/setup/packages.mjs';
import { checkNode } from '#server/setup/prerequisites.mjs';
import { say } from '#server/setup/progress.mjs';
import { ROOT } from '#server/setup/root.mjs';
import { ensureChromium } from '#tests/setup/chromium.mjs';
import { runSteps } from '#tests/setup/run-steps.mjs';
import { ALL_STEPS } from '#tests/setup/steps.mjs';

/** `npm test`: everything it needs, then every test. `npm test -- api lint` runs only the steps whose names begin so. */
const wanted = process.argv.slice(2);
const steps = ALL_STEPS.filter(({ name }) => wanted.length === 0 || wanted.some((start) => name.startsWith(start)));
if (steps.length === 0) say(`No such step. There are: ${ALL_STEPS.map(({ name }) => name).join(', ')}.`);

await main(async ({ signal }) => {
  try {
    checkNode();
    await ensurePackages(ROOT, signal);
    if (!process.env['DATABASE_URL']) await findBinaries(null, say);
    await ensureChromium(say);
  } catch (error) {
    say(error instanceof Error ? error.message : String(error));
    console.log('\n0 passed, 1 failed');
    process.exitCode = 1;
    return;
  }
  await runSteps(steps, signal);
});
