import { serve } from './serve.ts';

/** `npm start`: the production build. */
await serve('built');
