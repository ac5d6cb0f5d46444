import { mkdirSync, rmSync } from 'node:fs';
import path from 'node:path';
import { StackError, watchParent } from './bootstrap.mjs';
import { runChecks } from './checks.ts';
import { type Child, type Program, startChild } from './children.ts';
import { ensureChromium } from './chromium.ts';
import { createLifecycle } from './lifecycle.ts';
import { startCluster } from './postgres.ts';
import { reportFailure, step } from './progress.ts';
import { prepareTemplate, TEST_SERVER_NAMES } from './test-database.ts';
import { addTallies, type Tally, tallyPlaywright, tallyVitest } from './test-results.ts';
import { escapeRegExp, type Selection, selectTests, useDatabase } from './test-selection.ts';
import { repositoryRoot as root } from './workspace.ts';

/**
 * `npm test [-- NAME]`: checks, unit and database tests, browser tests; NAME runs a part, without the
 * checks. The last line is the sum of all; the exit code is 1 when anything failed or nothing was run.
 */

const results = path.join(root, '.local/test-results');
const lifecycle = createLifecycle();
let isEnding = false;

function end(): void {
  isEnding = true;
  void lifecycle.close();
}
for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) process.on(signal, end);
watchParent(end);

/** Runs a program that speaks for itself, and gives its exit code. */
async function run(program: Omit<Program, 'cwd' | 'inherit'>): Promise<number> {
  if (isEnding) return 1;
  const child = startChild({ ...program, cwd: root, inherit: true });
  own(child);
  const code = /^exit code (\d+)$/.exec(await child.ended)?.[1];
  return code === undefined ? 1 : Number(code);
}

function own(child: Child): void {
  lifecycle.own(child);
}

async function checks(): Promise<Tally> {
  const done = await step(console.log, 'Checking format, lint and types', () => runChecks(root, own));
  for (const { name, passed, output } of done) {
    console.log(passed ? `  ${name}: passed` : `\n${output}\n  ${name}: failed`);
  }
  const passed = done.filter((check) => check.passed).length;
  return { passed, failed: done.length - passed };
}

async function unitTests({ by, name, unit }: Selection): Promise<Tally> {
  const env: NodeJS.ProcessEnv = { ...process.env };
  const needsServer = by !== 'titles' && useDatabase(root, unit);
  const cluster = needsServer ? await startTestCluster() : undefined;
  if (cluster) {
    env[TEST_SERVER_NAMES.adminUrl] = cluster.adminUrl;
    env[TEST_SERVER_NAMES.owner] = cluster.urls.owner;
    env[TEST_SERVER_NAMES.web] = cluster.urls.web;
    env[TEST_SERVER_NAMES.worker] = cluster.urls.worker;
  }
  const report = path.join(results, 'vitest.json');
  const vitest = path.join(root, 'node_modules/.bin/vitest');
  const which = { all: [], files: unit, titles: ['-t', escapeRegExp(name)] }[by];
  const reporters = ['--reporter=default', '--reporter=json', `--outputFile.json=${report}`];
  const config = ['--config', 'tests/vitest.config.ts', '--passWithNoTests'];
  const code = await run({
    name: 'unit tests',
    command: [vitest, 'run', ...config, ...reporters, ...which],
    env,
  });
  await cluster?.stop();
  return tallyVitest(report, code);
}

async function startTestCluster() {
  const dir = path.join(root, '.local/test-pg');
  const cluster = await step(console.log, 'Starting a database for the tests', () =>
    startCluster({ dir, durable: false, fresh: true, say: console.log }),
  );
  lifecycle.onClose(() => cluster.stop());
  await step(console.log, 'Migrating its template', () => prepareTemplate(cluster));
  return cluster;
}

async function browserTests({ by, name, browser }: Selection): Promise<Tally> {
  const playwright = path.join(root, 'tests/node_modules/.bin/playwright');
  const config = ['--config', 'tests/playwright.config.ts'];
  const which = { all: [], files: browser.map(escapeRegExp), titles: ['-g', escapeRegExp(name)] }[by];
  const list = {
    name: 'list of browser tests',
    command: [playwright, 'test', '--list', ...config, ...which],
  } as const;
  if (by === 'titles' && !(await isAnyListed(list))) return { passed: 0, failed: 0 };
  await ensureChromium(process.env, console.log);
  const report = path.join(results, 'playwright.json');
  const env = { ...process.env, PLAYWRIGHT_JSON_OUTPUT_FILE: report, PLAYWRIGHT_JSON_OUTPUT_NAME: report };
  const command = [playwright, 'test', ...config, '--reporter=list,json', ...which] as const;
  const code = await run({ name: 'browser tests', command: [...command], env });
  return tallyPlaywright(report, code);
}

/** Listing starts neither browser nor stack. */
async function isAnyListed(list: {
  name: string;
  command: readonly [string, ...string[]];
}): Promise<boolean> {
  const child = startChild({ ...list, cwd: root, env: process.env });
  own(child);
  return (await child.ended) === 'exit code 0';
}

/** One part of the run. What keeps it from running is told, and counts as a failure. */
async function part(work: () => Promise<Tally>): Promise<Tally> {
  if (isEnding) return { passed: 0, failed: 0 };
  try {
    return await work();
  } catch (error) {
    reportFailure(error);
    return { passed: 0, failed: 1 };
  }
}

async function main(name: string): Promise<void> {
  rmSync(results, { recursive: true, force: true });
  mkdirSync(results, { recursive: true });
  const selection = selectTests(root, name);
  const tallies: Tally[] = [];
  if (selection.by === 'all') tallies.push(await part(checks));
  if (selection.unit.length > 0) tallies.push(await part(() => unitTests(selection)));
  if (selection.browser.length > 0) tallies.push(await part(() => browserTests(selection)));
  await lifecycle.close();
  if (isEnding) throw new StackError('The tests were ended before they were done.');
  const { passed, failed } = addTallies(tallies);
  if (passed + failed === 0) console.log(`\nNo test has "${name}" in its file's path or in its title.`);
  console.log(`\n${passed} passed, ${failed} failed`);
  process.exitCode = failed > 0 || passed === 0 ? 1 : 0;
}

try {
  await main(process.argv.slice(2).join(' ').trim());
} catch (error) {
  reportFailure(error);
  process.exitCode = 1;
}
