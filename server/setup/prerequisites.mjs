import { SetupError } from '#server/postgres/setup-error.mjs';

const NEEDED = [20, 19];

/** @throws SetupError on a Node that this application does not run on */
export function checkNode() {
  const [major = 0, minor = 0] = process.versions.node.split('.').map(Number);
  const [neededMajor = 0, neededMinor = 0] = NEEDED;
  if (major > neededMajor || (major === neededMajor && minor >= neededMinor)) return;
  throw new SetupError(`Node ${process.versions.node} is too old: install Node ${NEEDED.join('.')} or later, then start again.`);
}
