import { execFile } from 'node:child_process';
import { cp, mkdir, mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { dirname, join, relative } from 'node:path';
import { promisify } from 'node:util';

/** Lints made-up files under the project's own configuration, in a folder of their own. */
export interface Finding {
  readonly rule: string;
  readonly file: string;
  readonly line: number;
  readonly message: string;
}

const LINE = /^::\w+ title=([^,]+),file=([^,]+),line=(\d+)[^:]*::(.*)/;

async function copyConfiguration(folder: string): Promise<void> {
  const config = JSON.parse(await readFile('biome.json', 'utf8'));
  // The planted folder is no git repository; nothing else of the configuration changes.
  await writeFile(join(folder, 'biome.json'), JSON.stringify({ ...config, vcs: { enabled: false } }));
  await cp('tests/lint', join(folder, 'tests/lint'), { recursive: true, filter: (path) => !path.endsWith('.ts') });
}

async function lintOutput(folder: string): Promise<string> {
  const run = promisify(execFile);
  const biome = join(process.cwd(), 'node_modules/.bin/biome');
  const options = { cwd: folder, maxBuffer: 256 * 1024 * 1024 };
  try {
    return (await run(biome, ['lint', '--reporter=github', '--max-diagnostics=none', '.'], options)).stdout;
  } catch (error) {
    return (error as { stdout: string }).stdout;
  }
}

/** `files`: path -> text. Answers every finding of the linter, by rule, file and line. */
export async function lintPlanted(files: ReadonlyMap<string, string>): Promise<Finding[]> {
  const folder = await mkdtemp(join(tmpdir(), 'planted-breaches-'));
  try {
    await copyConfiguration(folder);
    for (const [path, text] of files) {
      await mkdir(dirname(join(folder, path)), { recursive: true });
      await writeFile(join(folder, path), text);
    }
    const output = await lintOutput(folder);
    if (output.includes('errored')) throw new Error(`A lint plugin failed: ${output.split('\n').find((line) => line.includes('errored'))}`);
    return output.split('\n').flatMap((line) => {
      const [, rule, file, number, message = ''] = LINE.exec(line) ?? [];
      return rule && file ? [{ rule, file: relative(folder, file), line: Number(number), message }] : [];
    });
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
}

export function linesFound(findings: readonly Finding[], file: string, rule: RegExp): number[] {
  const lines = findings.filter((finding) => finding.file === file && rule.test(finding.rule)).map((finding) => finding.line);
  return [...new Set(lines)].sort((a, b) => a - b);
}
