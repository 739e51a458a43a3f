import { deniedGlobals, deniedProperties, GLOBAL_ROOMS, type GlobalRoom } from './global-matrix.ts';
import { FREE_FILES, ROOMS } from './import-matrix.ts';
import type { Room } from './room.ts';

/** The linter's whole configuration, made from the two matrices. Nothing in biome.json is written by hand. */

const NEVER_UPWARDS = ['../**', '..', './../**', './**/../**'];
const UPWARDS_MESSAGE = "Name other folders by '#shared/…', '#server/…', '#src/…' or '#tests/…', never by '../'.";

function withSubpaths(name: string): string[] {
  return name === 'node:*' ? ['!node:*', '!node:*/**'] : [`!${name}`, `!${name}/**`];
}

/** Patterns are read in order and the last match decides, so rooms may lie inside one another. */
export function importPatterns(room: Room): string[] {
  const rooms = ROOMS.flatMap((other) => other.alias.map((alias) => (room.mayImport.includes(other.name) ? `!${alias}` : alias)));
  const local = (room.local ?? ['./**']).map((pattern) => `!${pattern}`);
  return ['**', ...rooms, ...local, ...room.packages.flatMap(withSubpaths), ...NEVER_UPWARDS];
}

function importRule(group: readonly string[], message: string): object {
  return { level: 'error', options: { patterns: [{ group, message }] } };
}

function roomOverride(room: Room): object {
  const message = `${room.name} may import only: ${[...room.mayImport, ...room.packages].join(', ') || 'nothing'}. See tests/lint/import-matrix.ts.`;
  return { includes: room.files, linter: { rules: { style: { noRestrictedImports: importRule(importPatterns(room), message) } } } };
}

function globalOverride(room: GlobalRoom): object {
  return {
    includes: room.files,
    linter: {
      rules: {
        style: { noRestrictedGlobals: { level: 'error', options: { deniedGlobals: deniedGlobals(room) } } },
        nursery: { noJsRestrictedProperties: { level: 'error', options: { entries: deniedProperties(room) } } },
      },
    },
  };
}

const RULES = {
  preset: 'recommended',
  complexity: {
    // The compiler's noPropertyAccessFromIndexSignature asks for the opposite.
    useLiteralKeys: 'off',
    noExcessiveLinesPerFunction: { level: 'error', options: { maxLines: 60, skipBlankLines: true } },
  },
  correctness: { noUnusedImports: 'error', noUnusedVariables: 'error', useImportExtensions: 'error' },
  performance: { noBarrelFile: 'error' },
  style: {
    noExcessiveLinesPerFile: { level: 'error', options: { maxLines: 300 } },
    noNonNullAssertion: 'off',
    useFilenamingConvention: { level: 'error', options: { filenameCases: ['kebab-case'] } },
    useImportType: 'error',
    noRestrictedImports: importRule(NEVER_UPWARDS, UPWARDS_MESSAGE),
  },
  // A promise that nobody waits for swallows its failure.
  nursery: { noFloatingPromises: 'error', noMisusedPromises: 'error' },
  suspicious: { noExplicitAny: 'error', noImportCycles: 'error' },
};

/** A test file is a list of cases in one callback: the limit on functions says nothing there. */
const TEST_OVERRIDE = {
  includes: ['tests/**'],
  linter: { rules: { complexity: { noExcessiveLinesPerFunction: 'off' } } },
};

export function biomeConfig(): object {
  return {
    root: true,
    vcs: { enabled: true, clientKind: 'git', useIgnoreFile: true },
    files: { includes: ['**', '!drizzle', '!public', '!package-lock.json', '!**/*.md'] },
    formatter: { enabled: true, indentStyle: 'space', indentWidth: 2, lineWidth: 140 },
    javascript: { formatter: { quoteStyle: 'single', jsxQuoteStyle: 'double', semicolons: 'always', trailingCommas: 'all' } },
    css: { parser: { tailwindDirectives: true } },
    plugins: [
      { path: './tests/lint/imports-in-sight.grit', includes: ['shared/**', 'server/**/*.ts', 'src/**'] },
      { path: './tests/lint/no-clock.grit', includes: ['shared/**'] },
    ],
    linter: { enabled: true, rules: RULES },
    overrides: [
      ...ROOMS.map(roomOverride),
      { includes: FREE_FILES, linter: { rules: { style: { noRestrictedImports: importRule(NEVER_UPWARDS, UPWARDS_MESSAGE) } } } },
      ...GLOBAL_ROOMS.map(globalOverride),
      TEST_OVERRIDE,
      // As JSON.stringify writes it.
      { includes: ['biome.json'], json: { formatter: { expand: 'always' } } },
    ],
  };
}

export function biomeJson(): string {
  return `${JSON.stringify(biomeConfig(), null, 2)}\n`;
}
