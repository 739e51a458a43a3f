import { beforeAll, expect, test } from 'vitest';
import { GLOBAL_ROOMS } from './global-matrix.ts';
import { type Finding, linesFound, lintPlanted } from './plant.ts';

const names = [...new Set(GLOBAL_ROOMS.flatMap((room) => room.denied))];
const properties = [...new Set(GLOBAL_ROOMS.flatMap((room) => room.deniedProperties))];
const CLOCKS = ['new Date()', 'new Date', 'Date()'];
const PURE = ['new Date(0)', 'Date.UTC(2020, 1)', 'Math.min(1, 2)'];

const expressions = [...names, ...properties, ...CLOCKS, ...PURE];
const text = `${expressions.map((expression, n) => `export const use${n} = ${expression};`).join('\n')}\n`;
const GLOBALS = /noRestrictedGlobals|noJsRestrictedProperties|plugin/;
let findings: Finding[];

beforeAll(async () => {
  findings = await lintPlanted(new Map(GLOBAL_ROOMS.map((room) => [room.sample, text])));
}, 60_000);

/** A property of a denied global is a use of that global. */
function denied(room: (typeof GLOBAL_ROOMS)[number], expression: string): boolean {
  const [object = ''] = expression.split('.');
  if ((room.denied as readonly string[]).includes(object) || room.deniedProperties.includes(expression)) return true;
  return room.name === 'shared' && CLOCKS.includes(expression);
}

test.each(GLOBAL_ROOMS.map((room) => [room.name, room] as const))('%s: what it may not touch is seen, nothing else is', (_name, room) => {
  const found = linesFound(findings, room.sample, GLOBALS).map((line) => expressions[line - 1]);
  expect(found).toEqual(expressions.filter((expression) => denied(room, expression)));
});
