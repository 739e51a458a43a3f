import { readdirSync, readFileSync } from 'node:fs';
import { beforeAll, describe, expect, test } from 'vitest';
import { biomeJson } from './biome-config.ts';
import { DESIGN } from './design-pairs.ts';
import { ROOMS, TELLING_PACKAGES } from './import-matrix.ts';
import { type Finding, linesFound, lintPlanted } from './plant.ts';
import type { Room } from './room.ts';

const IMPORTS = /noRestrictedImports/;

/** Four ways of writing an import; the linter must see each. */
const FORMS: readonly ((target: string, n: number) => string)[] = [
  (target, n) => `import * as static${n} from '${target}';`,
  (target, n) => `import type { Type${n} } from '${target}';`,
  (target, n) => `export { name${n} } from '${target}';`,
  (target, n) => `export const dynamic${n} = () => import('${target}');`,
];

interface Planted {
  readonly room: Room;
  readonly path: string;
  readonly lines: readonly { readonly target: string; readonly allowed: boolean }[];
  readonly text: string;
}

function packageAllowed(room: Room, target: string): boolean {
  return room.packages.some((name) => (name === 'node:*' ? target.startsWith('node:') : target === name || target.startsWith(`${name}/`)));
}

function plant(room: Room): Planted {
  const targets = [
    ...ROOMS.map((other) => ({ target: other.sample, allowed: room.mayImport.includes(other.name) })),
    ...TELLING_PACKAGES.map((target) => ({ target, allowed: packageAllowed(room, target) })),
    ...['../planted.ts', '../../planted.ts', './../planted.ts'].map((target) => ({ target, allowed: false })),
  ];
  const lines = targets.flatMap((line) => FORMS.map(() => line));
  const text = targets.flatMap(({ target }, n) => FORMS.map((form) => form(target, n))).join('\n');
  return { room, path: room.sample.slice(1), lines, text: `${text}\n` };
}

function breaches(planted: Planted): number[] {
  return planted.lines.flatMap((line, index) => (line.allowed ? [] : [index + 1]));
}

const planted = ROOMS.map(plant);
const sentences = Object.entries(DESIGN).map(([sentence, pairs], n) => ({
  sentence,
  pairs: pairs.map((pair, index) => ({ ...pair, path: pair.importer.replace('planted', `design-${n}-${index}`) })),
}));
const pairs = sentences.flatMap((each) => each.pairs);
let findings: Finding[];

beforeAll(async () => {
  const files = new Map(planted.map(({ path, text }) => [path, text]));
  for (const { path, target } of pairs)
    files.set(path, `import * as it from '${target}';\nexport const later = () => import('${target}');\n`);
  files.set('tests/unit/upwards.ts', "import * as it from '../planted.ts';\nimport * as other from '#shared/planted.ts';\n");
  files.set('src/run/hidden.ts', HIDDEN.map(([text]) => text).join('\n'));
  findings = await lintPlanted(files);
}, 60_000);

/** Ways round a rule that reads import paths, and the same ways used rightly. */
const HIDDEN: readonly (readonly [text: string, seen: boolean])[] = [
  // biome-ignore lint/suspicious/noTemplateCurlyInString: source text of the planted file
  ['export const a = (name: string) => import(`#src/paddock/${name}.ts`);', true],
  ['export const b = () => import(`#src/paddock/page.ts`);', true],
  ['export const c = (path: string) => import(path);', true],
  ["export const d = require('#src/paddock/page.ts');", true],
  ["export const e = import.meta.glob('#src/paddock/*.ts');", true],
  ["export const f = new URL('../paddock/worker.ts', import.meta.url);", true],
  ["export type G = import('#src/paddock/page.ts').Page;", true],
  ["export const h = new Worker(new URL('./worker.ts', import.meta.url));", false],
  ["export const i = () => import('./worker.ts');", false],
];

describe('biome.json', () => {
  test('is what the matrices make', () => {
    expect(readFileSync('biome.json', 'utf8'), 'run `npm run lint:generate`').toBe(biomeJson());
  });

  test('has a room for every folder of shared, server and src', () => {
    const claimed = new Set(ROOMS.map((room) => room.sample.slice(1).split('/').slice(0, 2).join('/')));
    const folders = ['shared', 'server', 'src'].flatMap((side) =>
      readdirSync(side, { withFileTypes: true }).flatMap((entry) => (entry.isDirectory() ? [`${side}/${entry.name}`] : [])),
    );
    expect(folders.filter((folder) => !claimed.has(folder))).toEqual([]);
  });
});

describe('every forbidden pair is seen, every allowed pair passes', () => {
  test.each(planted.map((plan) => [plan.room.name, plan] as const))('%s', (_name, plan) => {
    const found = linesFound(findings, plan.path, IMPORTS);
    const describeLine = (line: number) => `${plan.lines[line - 1]?.target} (form ${(line - 1) % FORMS.length})`;
    expect(found.map(describeLine)).toEqual(breaches(plan).map(describeLine));
  });

  test('there are breaches in every room', () => {
    expect(planted.filter((plan) => breaches(plan).length < 40).map((plan) => plan.room.name)).toEqual([]);
  });
});

describe("the design's own sentences", () => {
  test.each(sentences)('$sentence', ({ pairs }) => {
    const verdicts: Record<string, string> = { '': 'allowed', '1,2': 'forbidden' };
    const seen = (path: string) => verdicts[linesFound(findings, path, IMPORTS).join()] ?? 'seen in one form only';
    const line = ({ importer, target }: { importer: string; target: string }, verdict: string) => `${importer} -> ${target}: ${verdict}`;
    expect(pairs.map((pair) => line(pair, seen(pair.path)))).toEqual(pairs.map((pair) => line(pair, pair.verdict)));
  });
});

describe('how an import is written', () => {
  test("tests may import any room, but never by '../'", () => {
    expect(linesFound(findings, 'tests/unit/upwards.ts', IMPORTS)).toEqual([1]);
  });

  test.each(HIDDEN.map(([text, seen], index) => ({ text, seen, line: index + 1 })))('$text: seen $seen', ({ seen, line }) => {
    expect(linesFound(findings, 'src/run/hidden.ts', /plugin|noRestrictedImports/).includes(line)).toBe(seen);
  });
});
