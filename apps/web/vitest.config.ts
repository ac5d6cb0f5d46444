import { defineConfig } from 'vitest/config';

export default defineConfig({
  test: { name: 'web', testTimeout: 30_000, include: ['src/**/*.test.{ts,tsx}'] },
});
