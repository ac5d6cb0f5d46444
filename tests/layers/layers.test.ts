/**
 * Which package may use which, read from the imports themselves: domain uses none of ours; db and notices may use
 * domain; the web app may use those three; local-stack may use db; nothing uses the web app but the tests.
 */

import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import ts from 'typescript';
import { describe, expect, it } from 'vitest';

const root = path.resolve(import.meta.dirname, '../..');
const mayUse: Record<string, readonly string[]> = {
  domain: [],
  db: ['domain'],
  notices: ['domain'],
  web: ['domain', 'db', 'notices'],
  'local-stack': ['db'],
};
const folders: Record<string, string> = {
  domain: 'packages/domain',
  db: 'packages/db',
  notices: 'packages/notices',
  web: 'apps/web',
  'local-stack': 'packages/local-stack',
};

/** Files below a folder with one of the endings, without what is installed or built. */
function filesBelow(folder: string, endings: RegExp): string[] {
  const top = path.join(root, folder);
  return readdirSync(top, { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile() && endings.test(entry.name))
    .map((entry) => path.relative(top, path.join(entry.parentPath, entry.name)))
    .filter((file) => !/(^|\/)(node_modules|dist|\.astro)\//.test(file));
}

interface Import {
  file: string;
  from: string;
}

function importsOf(folder: string): Import[] {
  const files = filesBelow(folder, /\.(ts|tsx|mts|mjs|js|astro)$/);
  return files.flatMap((file) => {
    const text = readFileSync(path.join(root, folder, file), 'utf8');
    // The part of a page between its two rules is TypeScript.
    const code = file.endsWith('.astro') ? (text.split(/^---$/m)[1] ?? '') : text;
    return ts
      .preProcessFile(code)
      .importedFiles.map(({ fileName }) => ({ file: `${folder}/${file}`, from: fileName }));
  });
}

describe('the direction of the packages', () => {
  for (const [name, folder] of Object.entries(folders)) {
    it(`${name} imports only ${mayUse[name]?.join(', ') || 'nothing of ours'}`, () => {
      const imports = importsOf(folder);
      expect(imports.length).toBeGreaterThan(0);
      const wrong = imports.filter(({ from }) => {
        const ours = /^@strikeboard\/([^/]+)/.exec(from)?.[1];
        return ours !== undefined && ours !== name && !mayUse[name]?.includes(ours);
      });
      expect(wrong).toEqual([]);
    });

    it(`${name} does not reach into another package by path`, () => {
      const wrong = importsOf(folder).filter(({ file, from }) => {
        if (!from.startsWith('.')) return false;
        return !path.resolve(root, path.dirname(file), from).startsWith(path.join(root, folder) + path.sep);
      });
      // The queue of migrations lies at the top, beside the packages.
      expect(wrong.filter(({ from }) => !from.includes('drizzle'))).toEqual([]);
    });

    it(`${name} declares what it imports of ours`, () => {
      const manifest: { dependencies?: Record<string, string>; devDependencies?: Record<string, string> } =
        JSON.parse(readFileSync(path.join(root, folder, 'package.json'), 'utf8'));
      const declared = Object.keys({ ...manifest.dependencies, ...manifest.devDependencies });
      const used = new Set(
        importsOf(folder).flatMap(({ from }) => /^(@strikeboard\/[^/]+)/.exec(from)?.[1] ?? []),
      );
      expect([...used].filter((one) => !declared.includes(one))).toEqual([]);
    });
  }

  it('islands never import what only the server may', () => {
    const wrong = importsOf('apps/web')
      .filter(
        ({ file }) =>
          file.startsWith('apps/web/src/components/') && !file.endsWith('.astro') && !file.includes('.test.'),
      )
      .filter(
        ({ from }) =>
          /^@strikeboard\/(db|notices)/.test(from) ||
          from.includes('/lib/server/') ||
          from.startsWith('node:'),
      );
    expect(wrong).toEqual([]);
  });
});

describe('the domain is pure', () => {
  const files = filesBelow('packages/domain/src', /\.ts$/).filter(
    (file) => !file.endsWith('.test.ts') && !file.startsWith('testing/'),
  );
  const pureLibraries = ['libphonenumber-js', 'luxon', 'rrule', 'suncalc', 'zod'];

  it('reads no clock, no chance, no machine zone, no network and no disk', () => {
    const banned =
      /\bDate\.now\b|\bnew Date\(\s*\)|\bMath\.random\b|\bprocess\.|\bfetch\(|\bsetTimeout\b|\bsetInterval\b|\bcrypto\b|\bDateTime\.(now|local)\b|\.get(Hours|Minutes|Date|Day|Month|FullYear)\(/;
    const wrong = files.filter((file) => {
      const code = readFileSync(path.join(root, 'packages/domain/src', file), 'utf8').replace(
        /\/\*[\s\S]*?\*\/|\/\/.*$/gm,
        '',
      );
      return banned.test(code);
    });
    expect(files.length).toBeGreaterThan(20);
    expect(wrong).toEqual([]);
  });

  it('imports itself and pure libraries only', () => {
    const wrong = importsOf('packages/domain')
      .filter(
        ({ file }) =>
          file.startsWith('packages/domain/src/') && !file.includes('.test.') && !file.includes('/testing/'),
      )
      .filter(
        ({ from }) =>
          !from.startsWith('.') &&
          !pureLibraries.some((library) => from === library || from.startsWith(`${library}/`)),
      );
    expect(wrong).toEqual([]);
  });
});
