import { serve } from './serve.ts';

/** `npm run dev`: the sources, with hot reload. */
await serve('dev');
