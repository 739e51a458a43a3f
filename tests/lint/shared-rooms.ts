import type { Room } from './room.ts';

const SHARED_DATA = ['shared root', 'shared/course', 'shared/journal types'];
export const SHARED_PURE = [...SHARED_DATA, 'shared/pace', 'shared/journal', 'shared/sensor', 'shared/drive'];
export const SHARED_ALL = [...SHARED_PURE, 'shared/api', 'shared/api codes'];

export const SHARED_ROOMS: readonly Room[] = [
  {
    name: 'shared root',
    files: ['shared/*.ts'],
    sample: '#shared/planted.ts',
    alias: ['#shared/*.ts'],
    local: ['./*.ts'],
    mayImport: ['shared root'],
    packages: [],
  },
  {
    name: 'shared/course',
    files: ['shared/course/**'],
    sample: '#shared/course/planted.ts',
    alias: ['#shared/course/**'],
    mayImport: ['shared root', 'shared/course'],
    packages: ['geographiclib-geodesic'],
  },
  {
    name: 'shared/journal',
    files: ['shared/journal/**'],
    sample: '#shared/journal/planted.ts',
    alias: ['#shared/journal/**'],
    mayImport: [...SHARED_DATA, 'shared/journal', 'shared/pace'],
    packages: [],
  },
  {
    name: 'shared/journal types',
    files: ['shared/journal/observation.ts', 'shared/journal/run-header.ts'],
    sample: '#shared/journal/observation.ts',
    alias: ['#shared/journal/observation.ts', '#shared/journal/run-header.ts'],
    local: ['./observation.ts', './run-header.ts'],
    mayImport: SHARED_DATA,
    packages: [],
  },
  {
    name: 'shared/pace',
    files: ['shared/pace/**'],
    sample: '#shared/pace/planted.ts',
    alias: ['#shared/pace/**'],
    mayImport: [...SHARED_DATA, 'shared/pace'],
    packages: [],
  },
  {
    name: 'shared/sensor',
    files: ['shared/sensor/**'],
    sample: '#shared/sensor/planted.ts',
    alias: ['#shared/sensor/**'],
    mayImport: ['shared root', 'shared/journal types', 'shared/sensor'],
    packages: [],
  },
  {
    name: 'shared/drive',
    files: ['shared/drive/**'],
    sample: '#shared/drive/planted.ts',
    alias: ['#shared/drive/**'],
    mayImport: [...SHARED_DATA, 'shared/pace', 'shared/sensor', 'shared/drive'],
    packages: ['geographiclib-geodesic'],
  },
  {
    name: 'shared/api',
    files: ['shared/api/**'],
    sample: '#shared/api/planted.ts',
    alias: ['#shared/api/**'],
    mayImport: [...SHARED_DATA, 'shared/pace', 'shared/api', 'shared/api codes'],
    packages: ['zod'],
  },
  {
    // Codes are read by rooms that must not carry zod.
    name: 'shared/api codes',
    files: ['shared/api/error-codes.ts'],
    sample: '#shared/api/error-codes.ts',
    alias: ['#shared/api/error-codes.ts'],
    local: [],
    mayImport: ['shared root'],
    packages: [],
  },
];
