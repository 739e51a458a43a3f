// A thread does not inherit the loader of TypeScript that the main thread was started with.
import { register } from 'tsx/esm/api';

register();
await import('./drive-tasks.ts');
