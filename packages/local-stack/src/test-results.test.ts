import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { addTallies, tallyPlaywright, tallyVitest } from './test-results.ts';

// The reports' shapes are those of vitest 4.1's and Playwright 1.65's JSON reporters.

let folder: string;
beforeAll(() => {
  folder = mkdtempSync(path.join(tmpdir(), 'strikeboard-results-'));
});
afterAll(() => rmSync(folder, { recursive: true }));

function report(value: unknown): string {
  const file = path.join(folder, 'report.json');
  writeFileSync(file, typeof value === 'string' ? value : JSON.stringify(value));
  return file;
}

const vitest = (passed: number, failed: number, testResults: unknown[] = []) =>
  report({ numPassedTests: passed, numFailedTests: failed, testResults });

const playwright = (expected: number, unexpected: number, flaky = 0) =>
  report({ stats: { expected, unexpected, flaky, skipped: 2 }, errors: [] });

describe('tallyVitest', () => {
  it('counts passed and failed tests', () => {
    expect(tallyVitest(vitest(7, 2), 1)).toEqual({ passed: 7, failed: 2 });
    expect(tallyVitest(vitest(7, 0), 0)).toEqual({ passed: 7, failed: 0 });
  });

  it('counts a file that could not be run, once', () => {
    const broken = { status: 'failed', assertionResults: [] };
    const failing = { status: 'failed', assertionResults: [{ status: 'failed' }] };
    expect(tallyVitest(vitest(7, 1, [broken, failing]), 1)).toEqual({ passed: 7, failed: 2 });
  });

  it('never calls a failed run a passed one', () => {
    expect(tallyVitest(vitest(7, 0), 1)).toEqual({ passed: 7, failed: 1 });
    expect(tallyVitest(path.join(folder, 'missing.json'), 0)).toEqual({ passed: 0, failed: 1 });
    expect(tallyVitest(report('{"numPassedTests": 7'), 0)).toEqual({ passed: 0, failed: 1 });
  });
});

describe('tallyPlaywright', () => {
  it('counts a flaky test as failed', () => {
    expect(tallyPlaywright(playwright(5, 1, 1), 1)).toEqual({ passed: 5, failed: 2 });
    expect(tallyPlaywright(playwright(5, 0), 0)).toEqual({ passed: 5, failed: 0 });
  });

  it('never calls a failed run a passed one', () => {
    expect(tallyPlaywright(playwright(0, 0), 1)).toEqual({ passed: 0, failed: 1 });
    expect(tallyPlaywright(report('[]'), 0)).toEqual({ passed: 0, failed: 1 });
  });
});

it('addTallies sums', () => {
  expect(addTallies([])).toEqual({ passed: 0, failed: 0 });
  expect(
    addTallies([
      { passed: 2, failed: 0 },
      { passed: 40, failed: 3 },
    ]),
  ).toEqual({ passed: 42, failed: 3 });
});
