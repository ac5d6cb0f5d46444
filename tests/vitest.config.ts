import { existsSync, readdirSync } from 'node:fs';
import path from 'node:path';
import { defineConfig, type TestProjectConfiguration } from 'vitest/config';

const root = path.resolve(import.meta.dirname, '..');

/** One project per package. A package with a vitest.config.ts of its own is run with that. */
function packageProject(folder: string): TestProjectConfiguration {
  if (existsSync(path.join(root, folder, 'vitest.config.ts'))) return `./${folder}/vitest.config.ts`;
  return {
    extends: true,
    test: { name: path.basename(folder), root: path.join(root, folder), include: ['**/*.test.{ts,tsx}'] },
  };
}

export default defineConfig({
  root,
  test: {
    projects: [
      ...readdirSync(path.join(root, 'packages')).map((name) => packageProject(`packages/${name}`)),
      packageProject('apps/web'),
      {
        extends: true,
        test: {
          name: 'tests',
          root: path.join(root, 'tests'),
          include: ['{integration,layers,faults}/**/*.test.{ts,tsx}'],
        },
      },
    ],
    exclude: ['**/node_modules/**', '**/dist/**'],
    // A machine in a zone that no site and no viewer of the fixtures is in shows wrong conversions.
    env: { TZ: 'Asia/Tokyo' },
    // Two cores, with a database beside.
    testTimeout: 30_000,
    hookTimeout: 60_000,
  },
});
