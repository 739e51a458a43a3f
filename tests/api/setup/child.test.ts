import { type ChildProcess, spawn } from 'node:child_process';
import { once } from 'node:events';
import { afterEach, expect, test, vi } from 'vitest';
import { isAlive } from '#server/postgres/processes.mjs';

let holder: ChildProcess;
let pid: number;

async function hold(): Promise<void> {
  const started = spawn(process.execPath, ['tests/api/setup/hold-child.mjs'], { stdio: ['pipe', 'pipe', 'pipe'] });
  holder = started;
  const [[line]] = await Promise.all([once(started.stdout, 'data'), once(started.stderr, 'data')]);
  pid = Number(String(line));
}

afterEach(() => {
  holder.kill('SIGKILL');
});

const untilGone = () => vi.waitFor(() => expect(isAlive(pid)).toBe(false), { timeout: 15_000, interval: 20 });

test('a child stops with the program that started it, even where that one is killed outright', async () => {
  await hold();
  expect(isAlive(pid)).toBe(true);
  holder.kill('SIGKILL');
  await untilGone();
});

test('a child is stopped in order on request', async () => {
  await hold();
  holder.stdin?.write('stop\n');
  await once(holder, 'exit');
  expect(isAlive(pid)).toBe(false);
});
