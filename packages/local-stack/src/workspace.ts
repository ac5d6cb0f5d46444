import { createRequire } from 'node:module';
import path from 'node:path';
import { pathToFileURL } from 'node:url';

/** The checkout this file belongs to. */
export const repositoryRoot = path.resolve(import.meta.dirname, '../../..');

/** What `node --import` needs to run TypeScript, whatever the working folder. */
export const tsxLoader = pathToFileURL(
  createRequire(path.join(repositoryRoot, 'package.json')).resolve('tsx'),
).href;

/** What `node --import` needs to end a program when the one that started it is gone. */
export const dieWithParent = pathToFileURL(path.join(import.meta.dirname, 'die-with-parent.mjs')).href;
