import { spawn } from 'node:child_process';

/**
 * Runs one program to its end and answers what it printed. Nothing is read from the terminal.
 *
 * @typedef {object} CommandOptions
 * @property {string} [cwd]
 * @property {NodeJS.ProcessEnv} [env]
 * @property {number} [uid]
 * @property {number} [gid]
 * @property {AbortSignal} [signal] Ends the program.
 * @property {boolean} [show] Send the program's output to stderr as well.
 *
 * @typedef {{ code: number, output: string }} CommandResult
 *
 * @param {string} command
 * @param {readonly string[]} args
 * @param {CommandOptions} [options]
 * @returns {Promise<CommandResult>} code 127 where the program does not exist
 */
export function runCommand(command, args, options = {}) {
  const { show = false, ...rest } = options;
  return new Promise((resolve) => {
    const child = spawn(command, args, { ...rest, stdio: ['ignore', 'pipe', 'pipe'] });
    let output = '';
    for (const stream of [child.stdout, child.stderr]) {
      stream.on('data', (bytes) => {
        output += bytes;
        if (show) process.stderr.write(bytes);
      });
    }
    child.on('error', (error) => resolve({ code: 127, output: `${output}${error.message}` }));
    child.on('close', (code, signal) => resolve({ code: code ?? (signal === null ? 1 : 128), output }));
  });
}
