import { accessSync, constants } from 'node:fs';
import { installDebianPackage } from '#server/postgres/debian-package.mjs';
import { SetupError } from '#server/postgres/setup-error.mjs';

/** Debian's own browser: nothing is downloaded from elsewhere. CHROMIUM names another one. */
export const CHROMIUM = process.env['CHROMIUM'] || '/usr/bin/chromium';

function isThere() {
  try {
    accessSync(CHROMIUM, constants.X_OK);
    return true;
  } catch {
    return false;
  }
}

/** @param {import('#server/postgres/debian-package.mjs').Say} say */
export async function ensureChromium(say) {
  if (isThere()) return;
  await installDebianPackage('chromium', say);
  if (!isThere()) throw new SetupError(`${CHROMIUM} is missing. Set CHROMIUM to a Chromium 122 or later, then run the tests again.`);
}
