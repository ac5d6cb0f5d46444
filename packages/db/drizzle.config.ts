import { defineConfig } from 'drizzle-kit';

export default defineConfig({
  dialect: 'postgresql',
  schema: './src/tables/index.ts',
  out: '../../drizzle',
});
