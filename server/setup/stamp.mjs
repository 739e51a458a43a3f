import { createHash } from 'node:crypto';
import { existsSync, readdirSync, readFileSync, statSync } from 'node:fs';
import { join } from 'node:path';

/** @param {string} path @returns {string[]} */
function filesUnder(path) {
  if (!existsSync(path)) return [];
  if (!statSync(path).isDirectory()) return [path];
  return readdirSync(path)
    .sort()
    .flatMap((name) => filesUnder(join(path, name)));
}

/**
 * @param {string} root
 * @param {readonly string[]} paths files and folders under it
 * @returns {string} changes when a name or a byte of any of them does
 */
export function stampOf(root, paths) {
  const hash = createHash('sha256');
  for (const file of paths.flatMap((path) => filesUnder(join(root, path)))) {
    const bytes = readFileSync(file);
    hash.update(`${file.slice(root.length)}\0${bytes.length}\0`).update(bytes);
  }
  return hash.digest('hex');
}

/** @param {string} file @returns {string | null} */
export function readStamp(file) {
  try {
    return readFileSync(file, 'utf8').trim();
  } catch {
    return null;
  }
}
