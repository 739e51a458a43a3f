import { readFileSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import { assets, chunks, chunksToShow, DIST, gzipBytes, precached } from './built.ts';

const PADDOCK_ONLY = /node_modules\/(react-router|@tanstack|react-hook-form|@hookform|zod)\//;

const modulesToShow = (entry: string) => chunksToShow(entry).flatMap((chunk) => chunk.modules);

describe('the two bundles', () => {
  test('the cockpit carries no router, Query, forms or zod', () => {
    expect(modulesToShow('src/cockpit/cockpit.tsx').filter((module) => PADDOCK_ONLY.test(module))).toEqual([]);
  });

  test('the cockpit carries nothing of the paddock, and the paddock nothing of the cockpit', () => {
    expect(modulesToShow('src/cockpit/cockpit.tsx').filter((module) => module.includes('src/paddock/'))).toEqual([]);
    expect(modulesToShow('src/paddock/paddock.tsx').filter((module) => module.includes('src/cockpit/'))).toEqual([]);
  });

  test('the paddock does carry the router, so that the search above can find it', () => {
    const modules = chunks().flatMap((chunk) => chunk.modules);
    expect(modules.some((module) => PADDOCK_ONLY.test(module))).toBe(true);
  });

  test("the cockpit's JavaScript stays within 130 kB gzipped", () => {
    expect(gzipBytes(chunksToShow('src/cockpit/cockpit.tsx').map((chunk) => chunk.file))).toBeLessThanOrEqual(130_000);
  });
});

describe('the precache', () => {
  test('holds every file of the build, so that every page opens offline', () => {
    const held = new Set(precached());
    expect(assets().filter((file) => !held.has(file))).toEqual([]);
    expect(held.has('index.html')).toBe(true);
  });

  test('stays within 1.2 MB', () => {
    const bytes = precached().reduce((sum, file) => sum + statSync(join(DIST, file)).size, 0);
    expect(bytes).toBeLessThanOrEqual(1_200_000);
  });

  test('leaves /api and the files of the pulse box alone and waits for a prompt', () => {
    const worker = readFileSync(join(DIST, 'sw.js'), 'utf8');
    expect(worker).toContain('denylist:[/^\\/api(\\/|$)/,/^\\/pulse-box\\//]');
    expect(worker).toMatch(/"SKIP_WAITING"===\w+\.data\.type/);
  });
});

test('index.html holds no inline script or style, as the content security policy asks', () => {
  const page = readFileSync(join(DIST, 'index.html'), 'utf8');
  expect(page.match(/<script(?![^>]*\ssrc=)/g)).toBeNull();
  expect(page.match(/<style|\sstyle=|\son\w+=/g)).toBeNull();
});
