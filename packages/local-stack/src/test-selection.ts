import { existsSync, readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';

/** Which tests a run is about. Paths are relative to the checkout, with slashes. */
export type Selection = {
  /** `all`; `files`, those whose path has the name; `titles`, every file, and in it the tests whose title has the name */
  by: 'all' | 'files' | 'titles';
  name: string;
  unit: string[];
  browser: string[];
};

/** A name is looked for in the paths of test files first; only when no path has it, in the titles of tests. */
export function selectTests(root: string, name: string): Selection {
  const unit = ['packages', 'apps', 'tests/integration', 'tests/layers', 'tests/faults'].flatMap((folder) =>
    filesIn(root, folder, /\.test\.tsx?$/),
  );
  const browser = filesIn(root, 'tests/e2e', /\.(spec|test)\.ts$/);
  if (name === '') return { by: 'all', name, unit, browser };
  const has = (file: string) => file.toLowerCase().includes(name.toLowerCase());
  const inPaths = { unit: unit.filter(has), browser: browser.filter(has) };
  if (inPaths.unit.length + inPaths.browser.length > 0) return { by: 'files', name, ...inPaths };
  return { by: 'titles', name, unit, browser };
}

/** Whether these files use a database, so that one server started for the run serves them all. */
export function useDatabase(root: string, files: readonly string[]): boolean {
  return files.some((file) => readFileSync(path.join(root, file), 'utf8').includes('test-database'));
}

export function escapeRegExp(text: string): string {
  return text.replace(/[\\^$.*+?()[\]{}|/-]/g, '\\$&');
}

function filesIn(root: string, folder: string, pattern: RegExp): string[] {
  if (!existsSync(path.join(root, folder))) return [];
  return readdirSync(path.join(root, folder), { withFileTypes: true }).flatMap((entry) => {
    const inside = `${folder}/${entry.name}`;
    if (entry.isDirectory()) {
      return ['node_modules', 'dist', '.astro'].includes(entry.name) ? [] : filesIn(root, inside, pattern);
    }
    return pattern.test(entry.name) ? [inside] : [];
  });
}
