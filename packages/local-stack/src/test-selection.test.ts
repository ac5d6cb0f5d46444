import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { escapeRegExp, selectTests, useDatabase } from './test-selection.ts';

// How a part of a run is named: common practice, no source.

let root: string;

beforeAll(() => {
  root = mkdtempSync(path.join(tmpdir(), 'strikeboard-selection-'));
  const put = (file: string, text = '') => {
    mkdirSync(path.join(root, path.dirname(file)), { recursive: true });
    writeFileSync(path.join(root, file), text);
  };
  put('packages/domain/src/cure.test.ts');
  put('packages/domain/node_modules/zod/cure.test.ts');
  put(
    'packages/db/src/moves.test.ts',
    "import { freshDatabase } from '@strikeboard/local-stack/test-database';",
  );
  put('apps/web/src/board.test.tsx');
  put('tests/layers/layers.test.ts');
  put('tests/e2e/board.spec.ts');
  put('tests/e2e/helpers.ts');
});

afterAll(() => rmSync(root, { recursive: true }));

const unit = [
  'packages/db/src/moves.test.ts',
  'packages/domain/src/cure.test.ts',
  'apps/web/src/board.test.tsx',
  'tests/layers/layers.test.ts',
];

it('takes everything when nothing is named', () => {
  expect(selectTests(root, '')).toEqual({ by: 'all', name: '', unit, browser: ['tests/e2e/board.spec.ts'] });
});

it('takes the files whose path has the name, of both kinds', () => {
  expect(selectTests(root, 'Board')).toMatchObject({
    by: 'files',
    unit: ['apps/web/src/board.test.tsx'],
    browser: ['tests/e2e/board.spec.ts'],
  });
  expect(selectTests(root, 'cure')).toMatchObject({
    unit: ['packages/domain/src/cure.test.ts'],
    browser: [],
  });
});

it('looks in titles when no path has the name', () => {
  expect(selectTests(root, 'drops a pour')).toMatchObject({
    by: 'titles',
    unit,
    browser: ['tests/e2e/board.spec.ts'],
  });
});

it('knows which files need a database', () => {
  expect(useDatabase(root, unit)).toBe(true);
  expect(useDatabase(root, ['packages/domain/src/cure.test.ts'])).toBe(false);
});

it('escapes what a pattern would read otherwise', () => {
  const title = 'shows 1,250 ft² (4") at 5+ [a-b] $1 C:\\x /y^|{2}.*?';
  expect(new RegExp(escapeRegExp(title)).test(title)).toBe(true);
  expect(new RegExp(escapeRegExp('a.b')).test('axb')).toBe(false);
});
