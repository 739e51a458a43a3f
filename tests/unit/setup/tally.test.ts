import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { addTallies, lastLine, playwrightTally, stepTally, vitestTally } from '#tests/setup/tally.mjs';

let folder: string;
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'evenline-tally-'));
});
afterAll(() => rmSync(folder, { recursive: true }));

function report(content: unknown): string {
  const file = join(folder, 'report.json');
  writeFileSync(file, typeof content === 'string' ? content : JSON.stringify(content));
  return file;
}

describe('counts of the runners', () => {
  test("vitest's skipped and todo tests are neither passed nor failed", () => {
    const tally = vitestTally(report({ numPassedTests: 5, numFailedTests: 2, numPendingTests: 3, numTodoTests: 1 }));
    expect(tally).toEqual({ passed: 5, failed: 2, skipped: 4 });
  });

  test('a browser test that passed only when tried again has failed', () => {
    expect(playwrightTally(report({ stats: { expected: 4, unexpected: 1, flaky: 2, skipped: 0 } }))).toEqual({
      passed: 4,
      failed: 3,
      skipped: 0,
    });
  });

  test('a missing or torn report is no tally', () => {
    expect(vitestTally(join(folder, 'none.json'))).toBeNull();
    expect(playwrightTally(report('{"stats": {'))).toBeNull();
  });
});

describe('a step', () => {
  const passed = { passed: 5, failed: 0, skipped: 0 };

  test('that broke after its last test has failed once', () => {
    expect(stepTally(passed, 1)).toEqual({ ...passed, failed: 1 });
  });

  test('without a report has failed once, whatever its exit code', () => {
    expect(stepTally(null, 0)).toEqual({ passed: 0, failed: 1, skipped: 0 });
  });

  test('with failed tests counts them and no more', () => {
    expect(stepTally({ ...passed, failed: 3 }, 1)).toEqual({ ...passed, failed: 3 });
  });
});

test('the last line adds up, and names skipped tests only where there are some', () => {
  const total = addTallies([
    { passed: 1, failed: 0, skipped: 0 },
    { passed: 2, failed: 1, skipped: 0 },
  ]);
  expect(lastLine(total)).toBe('3 passed, 1 failed');
  expect(lastLine({ ...total, skipped: 2 })).toBe('3 passed, 1 failed, 2 skipped');
});
