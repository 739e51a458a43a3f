import { spawnSync } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { fromNdjson } from '#shared/journal/ndjson.ts';
import { replay } from '#shared/journal/replay.ts';
import { runSheet } from '#shared/pace/sheet.ts';

/** `npm run -s replay -- FILE`, as a person runs it. */
const ROOT = fileURLToPath(new URL('../../../', import.meta.url));
const FILE = fileURLToPath(new URL('./miles-scale.ndjson', import.meta.url));

function run(args: readonly string[], input = ''): { code: number | null; out: string; err: string } {
  const done = spawnSync(process.execPath, ['--import', 'tsx', 'server/cli/replay.ts', ...args], { cwd: ROOT, input, encoding: 'utf8' });
  return { code: done.status, out: done.stdout, err: done.stderr };
}

describe('replay from the command line', { timeout: 60_000 }, () => {
  const text = readFileSync(FILE, 'utf8');

  it('prints the run sheet of a journal as JSON', () => {
    const { code, out, err } = run([FILE]);
    expect([code, err]).toEqual([0, '']);
    const journal = fromNdjson(text);
    if (!journal.ok) throw new Error(journal.error.message);
    const { header, observations } = journal.value;
    expect(JSON.parse(out)).toEqual(JSON.parse(JSON.stringify(runSheet(replay(header, observations), header))));
  });

  it('reads standard input, and names the line of a fault', () => {
    const lines = text.split('\n');
    lines[41] = lines[41]?.slice(0, 20) as string;
    const { code, out, err } = run(['-'], lines.join('\n'));
    expect([code, out]).toEqual([1, '']);
    expect(err).toMatch(/^Line 42: /);
  });

  it('says how it is used, and what it cannot read', () => {
    expect(run([])).toMatchObject({ code: 1, out: '' });
    expect(run([]).err).toContain('Usage: npm run -s replay -- FILE');
    expect(run(['no-such.ndjson']).err).toContain('Cannot read no-such.ndjson');
  });
});
