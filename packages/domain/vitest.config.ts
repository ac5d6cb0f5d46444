import { defineConfig } from 'vitest/config';

// The machine's zone is one that no site and no viewer in the tests has.
process.env.TZ = 'Pacific/Chatham';

export default defineConfig({ test: { testTimeout: 30_000, include: ['src/**/*.test.ts'] } });
