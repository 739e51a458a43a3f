import { readFileSync, readlinkSync } from 'node:fs';

/**
 * Which process is which. A process id alone says little: after a crash or a reboot another program may carry it. Linux
 * tells when a process began and where it works, and both survive a look from outside.
 */

/**
 * @param {number} pid
 * @returns {readonly string[] | null} the kernel's account of a process from its state on, null where there is none
 */
function processStat(pid) {
  if (!Number.isInteger(pid) || pid <= 0) return null;
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8');
    // The name in parentheses may hold spaces, so fields are counted from after it: state is field 3 (proc(5)).
    return stat.slice(stat.lastIndexOf(')') + 2).split(' ');
  } catch {
    return null;
  }
}

/** @param {number} pid @returns {boolean} false also for one that has ended and was not yet collected by its parent */
export function isAlive(pid) {
  const state = processStat(pid)?.[0];
  return state !== undefined && state !== 'Z' && state !== 'X';
}

/**
 * The kernel's own start tick of a process (field 22): with the id it names one life of one program.
 *
 * @param {number} pid
 * @returns {string | null} null where there is no such process
 */
export function startTick(pid) {
  return isAlive(pid) ? (processStat(pid)?.[19] ?? null) : null;
}

/** @param {number} pid @returns {number | null} the parent (field 4) */
export function parentOf(pid) {
  const parent = processStat(pid)?.[1];
  return parent === undefined ? null : Number(parent);
}

/** @param {number} pid @returns {string | null} */
export function workingFolder(pid) {
  try {
    return readlinkSync(`/proc/${pid}/cwd`);
  } catch {
    return null;
  }
}

let marks = 0;

/** @returns {string} one use by this process, so that another start can tell whether the user still lives */
export function ownMark() {
  marks += 1;
  return `${process.pid}-${startTick(process.pid)}-${marks}`;
}

/** @param {string} mark */
export function markLives(mark) {
  const [pid, tick] = mark.split('-');
  return tick !== undefined && startTick(Number(pid)) === tick;
}
