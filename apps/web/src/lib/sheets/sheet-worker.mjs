// Entry of the worker thread. Plain JavaScript, because a thread does not inherit the loader that reads TypeScript.
import { register } from 'tsx/esm/api';

register();
await import('./sheet-worker.ts');
