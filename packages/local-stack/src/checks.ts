import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { z } from 'zod';
import { type Child, startChild } from './children.ts';

const packageSchema = z.object({ scripts: z.record(z.string(), z.string()).optional() });

export type Check = { name: string; passed: boolean; output: string };

/** Formatting and lint of the whole checkout, and the type check of every package that has one. */
export async function runChecks(root: string, onStart: (child: Child) => void): Promise<Check[]> {
  const lint = runCheck({ name: 'format and lint', folder: root, script: 'biome check .', root, onStart });
  // Two at a time, for two cores.
  const waiting = typecheckScripts(root);
  const done: Check[] = [];
  const work = async () => {
    for (let next = waiting.shift(); next !== undefined; next = waiting.shift()) {
      done.push(await runCheck({ ...next, root, onStart }));
    }
  };
  await lint;
  await Promise.all([work(), work()]);
  const failed = done.filter((check) => !check.passed);
  const types = {
    name: 'types',
    passed: failed.length === 0,
    output: failed.map(({ output }) => output).join('\n'),
  };
  return [await lint, types];
}

function typecheckScripts(root: string): { name: string; folder: string; script: string }[] {
  const folders = ['packages', 'apps'].flatMap((parent) =>
    readdirSync(path.join(root, parent)).map((name) => `${parent}/${name}`),
  );
  return [...folders, 'tests'].flatMap((name) => {
    const folder = path.join(root, name);
    const text = readFileSync(path.join(folder, 'package.json'), 'utf8');
    const script = packageSchema.parse(JSON.parse(text)).scripts?.typecheck;
    return script === undefined ? [] : [{ name, folder, script }];
  });
}

async function runCheck(options: {
  name: string;
  folder: string;
  script: string;
  root: string;
  onStart: (child: Child) => void;
}): Promise<Check> {
  const { name, folder, script, root, onStart } = options;
  const bins = [path.join(folder, 'node_modules/.bin'), path.join(root, 'node_modules/.bin')];
  const env = { ...process.env, PATH: [...bins, process.env.PATH].join(':'), ASTRO_TELEMETRY_DISABLED: '1' };
  const lines: string[] = [];
  const child = startChild({ name, command: ['/bin/sh', '-c', script], cwd: folder, env });
  child.onLine((line) => lines.push(line));
  onStart(child);
  const how = await child.ended;
  const output = [
    `${name}: ${script}`,
    ...lines,
    ...child.lastLines().filter((line) => !lines.includes(line)),
  ];
  return { name, passed: how === 'exit code 0', output: output.join('\n') };
}
