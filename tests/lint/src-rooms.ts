import type { Room } from './room.ts';
import { SHARED_ALL, SHARED_PURE } from './shared-rooms.ts';

const SCREEN = ['react', 'react-dom', 'uplot', 'virtual:pwa-register', 'workbox-window'];
const SRC_LOW = ['src/storage', 'src/sensors'];
const SRC_MIDDLE = ['src/run', 'src/components', 'src/sync', ...SRC_LOW];

export const SRC_ROOMS: readonly Room[] = [
  {
    // Chooses one of the two bundles; whatever it imports itself lies in both.
    name: 'src entry',
    files: ['src/*.ts', 'src/*.tsx'],
    sample: '#src/planted.ts',
    alias: ['#src/*.ts', '#src/*.tsx'],
    local: ['./*', './paddock/**', './cockpit/**', './components/**'],
    mayImport: ['src/paddock', 'src/cockpit', 'src/components'],
    packages: ['react', 'react-dom', '@fontsource', '@fontsource-variable', 'virtual:pwa-register'],
  },
  {
    name: 'src/storage',
    files: ['src/storage/**'],
    sample: '#src/storage/planted.ts',
    alias: ['#src/storage/**'],
    mayImport: [...SHARED_PURE, 'shared/api codes', 'src/storage'],
    packages: ['dexie'],
  },
  {
    name: 'src/sensors',
    files: ['src/sensors/**'],
    sample: '#src/sensors/planted.ts',
    alias: ['#src/sensors/**'],
    mayImport: [...SHARED_PURE, 'src/sensors'],
    packages: [],
  },
  {
    name: 'src/sync',
    files: ['src/sync/**'],
    sample: '#src/sync/planted.ts',
    alias: ['#src/sync/**'],
    mayImport: [...SHARED_PURE, 'shared/api codes', 'src/sync', ...SRC_LOW],
    packages: ['uuid'],
  },
  {
    name: 'src/run',
    files: ['src/run/**'],
    sample: '#src/run/planted.ts',
    alias: ['#src/run/**'],
    mayImport: [...SHARED_PURE, 'src/run', 'src/sync', ...SRC_LOW],
    packages: ['uuid'],
  },
  {
    name: 'src/api',
    files: ['src/api/**'],
    sample: '#src/api/planted.ts',
    alias: ['#src/api/**'],
    mayImport: [...SHARED_ALL, 'src/api', 'src/sync', ...SRC_LOW],
    packages: ['zod', '@tanstack/react-query'],
  },
  {
    name: 'src/components',
    files: ['src/components/**'],
    sample: '#src/components/planted.tsx',
    alias: ['#src/components/**'],
    mayImport: [...SHARED_PURE, 'shared/api codes', 'src/components', 'src/sync', ...SRC_LOW],
    packages: SCREEN,
  },
  {
    name: 'src/cockpit',
    files: ['src/cockpit/**'],
    sample: '#src/cockpit/planted.tsx',
    alias: ['#src/cockpit/**'],
    mayImport: [...SHARED_PURE, 'shared/api codes', 'src/cockpit', ...SRC_MIDDLE],
    packages: [...SCREEN, '@fontsource', 'uuid'],
  },
  {
    name: 'src/paddock',
    files: ['src/paddock/**'],
    sample: '#src/paddock/planted.tsx',
    alias: ['#src/paddock/**'],
    mayImport: [...SHARED_ALL, 'src/paddock', 'src/api', ...SRC_MIDDLE],
    packages: [
      ...SCREEN,
      'react-router',
      '@tanstack',
      'react-hook-form',
      '@hookform/resolvers',
      'zod',
      'uuid',
      '@fontsource',
      '@fontsource-variable',
    ],
  },
];
