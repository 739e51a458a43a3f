import { runCommand } from './run-command.mjs';
import { SetupError } from './setup-error.mjs';

/** @typedef {(text: string) => void} Say one line of progress for the person */

const QUIET = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' };

/** @returns {Promise<readonly string[] | null>} what to put before a command that needs root; null where nothing helps */
async function rootPrefix() {
  if (process.getuid?.() === 0) return [];
  return (await runCommand('sudo', ['-n', 'true'])).code === 0 ? ['sudo', '-n'] : null;
}

/**
 * Installs a Debian package, or says the one command that does.
 *
 * @param {string} name
 * @param {Say} say
 */
export async function installDebianPackage(name, say) {
  const byHand = `sudo apt-get install --yes ${name}`;
  if ((await runCommand('apt-get', ['--version'])).code !== 0) {
    throw new SetupError(`${name} is missing and this is no Debian system: install ${name} your system's way, then start again.`);
  }
  const prefix = await rootPrefix();
  if (prefix === null) throw new SetupError(`${name} is missing. Run this, then start again:\n\n  ${byHand}\n`);
  say(`Installing Debian's ${name} (a minute or two) …`);
  for (const args of [
    ['apt-get', 'update'],
    ['apt-get', 'install', '--yes', '--no-install-recommends', name],
  ]) {
    const [command = '', ...rest] = [...prefix, ...args];
    const { code, output } = await runCommand(command, rest, { env: QUIET });
    // An old package list may still serve; only the install decides.
    if (code !== 0 && args[1] === 'install')
      throw new SetupError(`${output}\nInstalling ${name} failed. Run this, then start again:\n\n  ${byHand}\n`);
  }
}
