import { existsSync, readFileSync } from 'node:fs';
import { z } from 'zod';

/** How many tests passed and failed. What was left out on purpose counts as neither. */
export type Tally = { passed: number; failed: number };

const vitestReport = z.object({
  numPassedTests: z.int(),
  numFailedTests: z.int(),
  testResults: z.array(
    z.object({ status: z.string(), assertionResults: z.array(z.object({ status: z.string() })) }),
  ),
});

const playwrightReport = z.object({
  stats: z.object({ expected: z.int(), unexpected: z.int(), flaky: z.int() }),
  errors: z.array(z.unknown()),
});

export function addTallies(tallies: readonly Tally[]): Tally {
  return tallies.reduce(
    (sum, { passed, failed }) => ({ passed: sum.passed + passed, failed: sum.failed + failed }),
    {
      passed: 0,
      failed: 0,
    },
  );
}

/**
 * Counts vitest's JSON report. A file that could not be run counts as one failure, and so does a run
 * that failed (`exitCode`) without a failed test, or left no report.
 */
export function tallyVitest(reportFile: string, exitCode: number): Tally {
  const report = readReport(reportFile, vitestReport);
  if (!report) return { passed: 0, failed: 1 };
  const brokenFiles = report.testResults.filter(
    ({ status, assertionResults }) =>
      status === 'failed' && assertionResults.every((assertion) => assertion.status !== 'failed'),
  ).length;
  const failed = report.numFailedTests + brokenFiles;
  return { passed: report.numPassedTests, failed: exitCode !== 0 && failed === 0 ? 1 : failed };
}

/** Counts Playwright's JSON report in the same way. A test that passed only when tried again has failed. */
export function tallyPlaywright(reportFile: string, exitCode: number): Tally {
  const report = readReport(reportFile, playwrightReport);
  if (!report) return { passed: 0, failed: 1 };
  const failed = report.stats.unexpected + report.stats.flaky;
  return { passed: report.stats.expected, failed: exitCode !== 0 && failed === 0 ? 1 : failed };
}

function readReport<T>(file: string, schema: z.ZodType<T>): T | undefined {
  if (!existsSync(file)) return undefined;
  try {
    return schema.parse(JSON.parse(readFileSync(file, 'utf8')));
  } catch {
    return undefined;
  }
}
