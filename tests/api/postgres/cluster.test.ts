import { type ChildProcess, spawn } from 'node:child_process';
import { once } from 'node:events';
import { existsSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import pg from 'pg';
import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest';
import { openCluster } from '#server/postgres/cluster.mjs';
import { type ClusterFolder, disposableClusterFolder } from '#server/postgres/cluster-folder.mjs';
import { runningPostmaster, stopPostmaster } from '#server/postgres/postmaster.mjs';

/** Each test makes a cluster and starts it once or twice, on a machine that may be busy. */
vi.setConfig({ testTimeout: 90_000, hookTimeout: 90_000 });

const quiet = { say: () => undefined };
let folder: ClusterFolder;
const holders: ChildProcess[] = [];

beforeEach(async () => {
  folder = await disposableClusterFolder();
});

afterEach(async () => {
  for (const holder of holders.splice(0)) holder.kill('SIGKILL');
  await vi.waitFor(() => expect(existsSync(folder.users) && runningPostmaster(folder.data)).toBeFalsy(), { timeout: 60_000 });
  await stopPostmaster(folder.data, 'SIGQUIT');
  rmSync(folder.base, { recursive: true, force: true });
});

async function ask(url: string, sql: string): Promise<unknown[]> {
  const client = new pg.Client({ connectionString: url });
  await client.connect();
  try {
    return (await client.query(sql)).rows;
  } finally {
    await client.end();
  }
}

/** Another program that uses the cluster, as `npm start` and `npm run dev` side by side do. */
async function hold(): Promise<{ holder: ChildProcess; url: string }> {
  const holder = spawn(process.execPath, ['tests/api/postgres/hold-cluster.mjs', folder.base], { stdio: ['pipe', 'pipe', 'inherit'] });
  holders.push(holder);
  const [line] = await once(holder.stdout, 'data');
  return { holder, url: String(line).trim() };
}

const untilStopped = () => vi.waitFor(() => expect(runningPostmaster(folder.data)).toBeNull(), { timeout: 60_000, interval: 50 });

describe('a cluster', () => {
  test('starts, keeps its data over a stop, and starts again', async () => {
    const first = await openCluster(folder, quiet);
    await ask(first.url, 'create table kept as select 7 as n');
    await first.release();
    expect(runningPostmaster(folder.data)).toBeNull();
    const second = await openCluster(folder, quiet);
    expect(await ask(second.url, 'select n from kept')).toEqual([{ n: 7 }]);
    await second.release();
  });

  test('listens on loopback only, asks for a password and keeps its socket within its folder', async () => {
    const cluster = await openCluster(folder, quiet);
    const [settings] = await ask(cluster.url, "select current_setting('listen_addresses') a, current_setting('unix_socket_directories') s");
    expect(settings).toEqual({ a: '127.0.0.1', s: folder.socket });
    const without = new URL(cluster.url);
    without.password = 'wrong';
    await expect(ask(without.href, 'select 1')).rejects.toThrow(/password authentication failed/);
    await cluster.release();
  });

  test('is started once when two programs ask at the same time, and stays until the last has gone', async () => {
    const [one, two] = await Promise.all([hold(), hold()]);
    expect(one.url).toBe(two.url);
    one.holder.stdin?.write('go\n');
    await once(one.holder, 'exit');
    expect(await ask(two.url, 'select 1 as n')).toEqual([{ n: 1 }]);
    two.holder.stdin?.write('go\n');
    await once(two.holder, 'exit');
    expect(runningPostmaster(folder.data)).toBeNull();
  });
});

describe('after a crash', () => {
  test('a program killed outright leaves no server behind', async () => {
    const { holder } = await hold();
    holder.kill('SIGKILL');
    await untilStopped();
  });

  test('a killed program does not take the cluster from another one that uses it', async () => {
    const [one, two] = await Promise.all([hold(), hold()]);
    const killed = once(one.holder, 'exit');
    one.holder.kill('SIGKILL');
    await killed;
    const third = await openCluster(folder, quiet);
    expect(third.adopted).toBe(true);
    await third.release();
    expect(await ask(two.url, 'select 1 as n')).toEqual([{ n: 1 }]);
  });

  test('a server that runs without any user is adopted, and stopped by its new user', async () => {
    const orphaned = await openCluster(folder, quiet);
    rmSync(folder.users, { recursive: true });
    const adopted = await openCluster(folder, quiet);
    expect(adopted.adopted).toBe(true);
    expect(adopted.url).toBe(orphaned.url);
    await adopted.release();
    expect(runningPostmaster(folder.data)).toBeNull();
    await orphaned.release();
  });

  test('a killed server starts again and recovers what was committed', async () => {
    const first = await openCluster(folder, quiet);
    await ask(first.url, 'create table kept as select 7 as n');
    process.kill(runningPostmaster(folder.data)?.pid ?? 0, 'SIGKILL');
    await untilStopped();
    expect(existsSync(join(folder.data, 'postmaster.pid'))).toBe(true);
    const second = await openCluster(folder, quiet);
    expect(second.adopted).toBe(false);
    expect(await ask(second.url, 'select n from kept')).toEqual([{ n: 7 }]);
    await second.release();
    await first.release();
  });
});

describe('a pid file that outlived its server', () => {
  async function withPidFile(pid: number): Promise<void> {
    const first = await openCluster(folder, quiet);
    const lines = readFileSync(join(folder.data, 'postmaster.pid'), 'utf8').split('\n');
    await first.release();
    writeFileSync(join(folder.data, 'postmaster.pid'), [String(pid), ...lines.slice(1)].join('\n'));
  }

  test('naming another living program is not believed', async () => {
    await withPidFile(process.pid);
    expect(runningPostmaster(folder.data)).toBeNull();
    const cluster = await openCluster(folder, quiet);
    expect(cluster.adopted).toBe(false);
    expect(await ask(cluster.url, 'select 1 as n')).toEqual([{ n: 1 }]);
    await cluster.release();
  });

  test('naming a program that is gone is not believed', async () => {
    const gone = spawn(process.execPath, ['-e', '']);
    await once(gone, 'exit');
    await withPidFile(gone.pid ?? 0);
    const cluster = await openCluster(folder, quiet);
    expect(cluster.adopted).toBe(false);
    await cluster.release();
  });
});

test('a half-made data folder is made anew', async () => {
  writeFileSync(`${folder.data}.half-made`, 'left by a crash');
  const cluster = await openCluster(folder, quiet);
  expect(await ask(cluster.url, 'select 1 as n')).toEqual([{ n: 1 }]);
  await cluster.release();
});

test('a data folder of another version is refused with what to do', async () => {
  const made = await openCluster(folder, quiet);
  await made.release();
  writeFileSync(join(folder.data, 'PG_VERSION'), '9\n');
  await expect(openCluster(folder, quiet)).rejects.toThrow(/made by PostgreSQL 9.*Install postgresql-9, or set DATABASE_URL/s);
});
