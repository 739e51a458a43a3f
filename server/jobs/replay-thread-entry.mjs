// A thread does not inherit the loader for TypeScript from the process, so it brings its own.
import { register } from 'tsx/esm/api';

register();
await import('./replay-worker.ts');
