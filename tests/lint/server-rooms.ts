import type { Room } from './room.ts';
import { SHARED_ALL } from './shared-rooms.ts';

const SERVER_FRAME = ['express', 'helmet', 'pino', 'pino-http', 'zod', 'node:*'];

export const SERVER_ROOMS: readonly Room[] = [
  {
    name: 'server root',
    files: ['server/*.ts'],
    sample: '#server/planted.ts',
    alias: ['#server/*.ts'],
    mayImport: [...SHARED_ALL, 'server root', 'server/db', 'server/auth', 'server/routes', 'server/services', 'server/mail', 'server/jobs'],
    packages: SERVER_FRAME,
  },
  {
    name: 'server/db',
    files: ['server/db/**'],
    sample: '#server/db/planted.ts',
    alias: ['#server/db/**'],
    mayImport: [...SHARED_ALL, 'server root', 'server/db'],
    packages: ['drizzle-orm', 'pg', 'node:*'],
  },
  {
    name: 'server/auth',
    files: ['server/auth/**'],
    sample: '#server/auth/planted.ts',
    alias: ['#server/auth/**'],
    mayImport: [...SHARED_ALL, 'server root', 'server/db', 'server/auth'],
    packages: ['lucia', '@lucia-auth/adapter-drizzle', '@node-rs/argon2', 'express', 'node:*'],
  },
  {
    name: 'server/mail',
    files: ['server/mail/**'],
    sample: '#server/mail/planted.ts',
    alias: ['#server/mail/**'],
    mayImport: [...SHARED_ALL, 'server root', 'server/mail'],
    packages: ['nodemailer', 'node:*'],
  },
  {
    name: 'server/services',
    files: ['server/services/**'],
    sample: '#server/services/planted.ts',
    alias: ['#server/services/**'],
    mayImport: [...SHARED_ALL, 'server root', 'server/db', 'server/auth', 'server/mail', 'server/services'],
    packages: ['drizzle-orm', 'uuid', 'zod', 'node:*'],
  },
  {
    // The queue's own front door: a job calls a service verb, as a route does; services hand work over through their context.
    name: 'server/jobs',
    files: ['server/jobs/**'],
    sample: '#server/jobs/planted.ts',
    alias: ['#server/jobs/**'],
    mayImport: [...SHARED_ALL, 'server root', 'server/db', 'server/mail', 'server/services', 'server/jobs'],
    packages: ['pg-boss', 'pino', 'tsx', 'node:*'],
  },
  {
    name: 'server/routes',
    files: ['server/routes/**'],
    sample: '#server/routes/planted.ts',
    alias: ['#server/routes/**'],
    mayImport: [...SHARED_ALL, 'server root', 'server/auth', 'server/services', 'server/routes'],
    packages: SERVER_FRAME,
  },
  {
    // Runs before node_modules exist.
    name: 'server/postgres',
    files: ['server/postgres/**'],
    sample: '#server/postgres/planted.mjs',
    alias: ['#server/postgres/**'],
    mayImport: ['server/postgres'],
    packages: ['node:*'],
  },
  {
    name: 'server/setup',
    files: ['server/setup/**'],
    sample: '#server/setup/planted.mjs',
    alias: ['#server/setup/**'],
    mayImport: ['server/postgres', 'server/setup'],
    packages: ['node:*'],
  },
  {
    name: 'server/cli',
    files: ['server/cli/**'],
    sample: '#server/cli/planted.ts',
    alias: ['#server/cli/**'],
    mayImport: [
      ...SHARED_ALL,
      'server root',
      'server/db',
      'server/auth',
      'server/services',
      'server/jobs',
      'server/postgres',
      'server/cli',
    ],
    packages: ['node:*'],
  },
];
