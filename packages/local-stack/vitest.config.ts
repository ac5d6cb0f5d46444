import { defineConfig } from 'vitest/config';

// These tests start and end servers, on a machine that may be doing other work.
export default defineConfig({
  test: { name: 'local-stack', include: ['src/**/*.test.ts'], testTimeout: 60_000, hookTimeout: 60_000 },
});
