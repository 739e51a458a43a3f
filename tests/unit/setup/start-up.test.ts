import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { markLives, ownMark, startTick } from '#server/postgres/processes.mjs';
import { withStartLock } from '#server/postgres/start-lock.mjs';
import { nextFreePort } from '#server/setup/address.mjs';
import { isInstalled } from '#server/setup/packages.mjs';
import { stampOf } from '#server/setup/stamp.mjs';

let root: string;
beforeEach(() => {
  root = mkdtempSync(join(tmpdir(), 'evenline-start-up-'));
  mkdirSync(join(root, 'node_modules'));
});
afterEach(() => rmSync(root, { recursive: true }));

const write = (path: string, content: unknown) =>
  writeFileSync(join(root, path), typeof content === 'string' ? content : JSON.stringify(content));

describe('installed packages', () => {
  const lock = { packages: { '': {}, 'node_modules/a': { version: '1.0.0' }, 'node_modules/b': { version: '2.0.0', optional: true } } };

  test('fit the lock where every package has its version; optional ones may be missing', () => {
    write('package-lock.json', lock);
    write('node_modules/.package-lock.json', { packages: { 'node_modules/a': { version: '1.0.0' } } });
    expect(isInstalled(root)).toBe(true);
  });

  test('do not fit an older version, a missing package or a broken-off install', () => {
    write('package-lock.json', lock);
    expect(isInstalled(root)).toBe(false);
    write('node_modules/.package-lock.json', { packages: { 'node_modules/a': { version: '0.9.0' } } });
    expect(isInstalled(root)).toBe(false);
    write('node_modules/.package-lock.json', { packages: {} });
    expect(isInstalled(root)).toBe(false);
  });
});

describe('the stamp of the sources', () => {
  test('changes with a byte, a name, a new file, and with nothing else', () => {
    mkdirSync(join(root, 'src'));
    write('src/a.ts', 'one');
    const stamps = [stampOf(root, ['src', 'absent'])];
    expect(stampOf(root, ['src', 'absent'])).toBe(stamps[0]);
    write('src/a.ts', 'two');
    stamps.push(stampOf(root, ['src', 'absent']));
    write('src/b.ts', 'two');
    stamps.push(stampOf(root, ['src', 'absent']));
    rmSync(join(root, 'src/a.ts'));
    stamps.push(stampOf(root, ['src', 'absent']));
    expect(new Set(stamps).size).toBe(4);
  });
});

describe('the start lock', () => {
  test('lets one in at a time, and the next one in after a failure', async () => {
    const order: string[] = [];
    const first = withStartLock(root, async () => {
      order.push('first in');
      await new Promise((resolve) => setImmediate(resolve));
      order.push('first out');
      throw new Error('failed inside');
    });
    const second = withStartLock(root, async () => order.push('second in'));
    await expect(first).rejects.toThrow('failed inside');
    await second;
    expect(order).toEqual(['first in', 'first out', 'second in']);
  });
});

describe('the mark of a process', () => {
  test('is of this life of this process only', () => {
    const mark = ownMark();
    expect(markLives(mark)).toBe(true);
    const [pid, tick, n] = mark.split('-');
    expect(markLives(`${pid}-${Number(tick) + 1}-${n}`)).toBe(false);
    expect(startTick(2 ** 22 + 1)).toBeNull();
  });
});

test('a busy port gives way to the next free one', async () => {
  const busy = createServer();
  const port = await new Promise<number>((resolve) => {
    busy.listen(0, '127.0.0.1', () => resolve((busy.address() as { port: number }).port));
  });
  expect(await nextFreePort(port)).toBeGreaterThan(port);
  await new Promise((resolve) => busy.close(resolve));
});
