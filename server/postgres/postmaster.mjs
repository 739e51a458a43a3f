import { existsSync, readdirSync, readFileSync, realpathSync, rmSync } from 'node:fs';
import { connect } from 'node:net';
import { join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { isAlive, workingFolder } from './processes.mjs';

/**
 * Tells by its pid file whether a cluster runs. The file may outlive the server (a kill, a power cut) and its process id may
 * by then belong to another program; a PostgreSQL server works inside its data folder, and that settles it.
 */

const STOP_PATIENCE_MS = 30_000;

/** @param {string} data @returns {{ pid: number, port: number } | null} what the pid file says, true or not */
function pidFile(data) {
  try {
    // Lines of postmaster.pid: process, data folder, start time, port, … (PostgreSQL, src/include/utils/pidfile.h).
    const lines = readFileSync(join(data, 'postmaster.pid'), 'utf8').split('\n');
    return { pid: Number(lines[0]), port: Number(lines[3]) };
  } catch {
    return null;
  }
}

/** @param {string} data @returns {string} */
function realFolder(data) {
  try {
    return realpathSync(data);
  } catch {
    return data;
  }
}

/** @param {string} data @returns {number[]} every process of this cluster */
function processesOf(data) {
  const folder = realFolder(data);
  return readdirSync('/proc')
    .map(Number)
    .filter((pid) => Number.isInteger(pid) && pid !== process.pid && workingFolder(pid) === folder);
}

/** @param {string} data @returns {{ pid: number, port: number } | null} the server that runs on this data folder */
export function runningPostmaster(data) {
  const said = pidFile(data);
  return said !== null && isAlive(said.pid) && workingFolder(said.pid) === realFolder(data) ? said : null;
}

/** @param {number} port @returns {Promise<boolean>} */
function answers(port) {
  return new Promise((resolve) => {
    const socket = connect(port, '127.0.0.1');
    socket.on('connect', () => resolve(true));
    socket.on('error', () => resolve(false));
    socket.on('close', () => socket.destroy());
    socket.on('connect', () => socket.end());
  });
}

/**
 * Waits for a server that is starting or recovering, or until it is gone.
 *
 * @param {string} data
 * @returns {Promise<number | null>} its port
 */
export async function portOfRunning(data) {
  for (;;) {
    const running = runningPostmaster(data);
    if (running === null) return null;
    if (running.port > 0 && (await answers(running.port))) return running.port;
    await wait(50);
  }
}

/** @param {readonly number[]} pids @param {number} patienceMs @returns {Promise<boolean>} whether all are gone */
async function gone(pids, patienceMs) {
  const deadline = Date.now() + patienceMs;
  while (pids.some(isAlive)) {
    if (Date.now() > deadline) return false;
    await wait(20);
  }
  return true;
}

/** @param {readonly number[]} pids @param {NodeJS.Signals} signal */
function signalAll(pids, signal) {
  for (const pid of pids) {
    try {
      process.kill(pid, signal);
    } catch {
      // Gone meanwhile, which is what was wanted.
    }
  }
}

/**
 * Stops whatever runs on this data folder: SIGINT is PostgreSQL's fast shutdown, SIGQUIT its immediate one.
 *
 * @param {string} data
 * @param {'SIGINT' | 'SIGQUIT'} signal
 */
export async function stopPostmaster(data, signal) {
  const running = runningPostmaster(data);
  if (running !== null) {
    signalAll([running.pid], signal);
    if (!(await gone([running.pid], STOP_PATIENCE_MS))) signalAll([running.pid], 'SIGQUIT');
  }
  await clearRemains(data);
}

/**
 * Backends outlive a killed postmaster for a moment and keep its shared memory; and a pid file that names another program
 * would stop PostgreSQL from starting.
 *
 * @param {string} data
 */
export async function clearRemains(data) {
  const orphans = processesOf(data);
  if (!(await gone(orphans, 5000))) {
    signalAll(orphans, 'SIGQUIT');
    await gone(orphans, 5000);
  }
  // PostgreSQL takes any process of that id for a server, even one that has ended and waits to be collected.
  const said = pidFile(data);
  if (said !== null && runningPostmaster(data) === null && existsSync(`/proc/${said.pid}`))
    rmSync(join(data, 'postmaster.pid'), { force: true });
}
