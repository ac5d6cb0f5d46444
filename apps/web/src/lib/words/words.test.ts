import {
  channels,
  finishes,
  jointings,
  noticeStates,
  placingMethods,
  roles,
  visitKinds,
  visitStates,
} from '@strikeboard/domain/vocabulary';
import { describe, expect, it } from 'vitest';
import { en } from './en.ts';
import { es } from './es.ts';

/** Every text of a catalogue by its path; functions are called with a number and a text that can stand in any place. */
function texts(value: unknown, path = ''): [string, string][] {
  if (typeof value === 'string') return [[path, value]];
  if (typeof value === 'function') return [[`${path}()`, String(value(3))]];
  if (value === null || typeof value !== 'object') throw new Error(`${path} is no text`);
  return Object.entries(value).flatMap(([key, inner]) => texts(inner, path === '' ? key : `${path}.${key}`));
}

describe('the catalogues of words (common practice, no source)', () => {
  const both = { en: new Map(texts(en)), es: new Map(texts(es)) };

  it('have the same keys', () => {
    expect([...both.es.keys()].toSorted()).toEqual([...both.en.keys()].toSorted());
  });

  it.each(['en', 'es'] as const)('leave nothing blank in %s, and use what they are given', (language) => {
    for (const [path, text] of both[language]) {
      expect(text.trim(), path).not.toBe('');
      if (path.endsWith('()')) expect(text, path).toContain('3');
    }
  });

  it('are translated, but for words that are the same in both languages', () => {
    const same = new Set(['no', 'placingMethods.buggy', 'answers.no', 'yards()']);
    const untranslated = [...both.en].filter(([path, text]) => both.es.get(path) === text && !same.has(path));
    expect(untranslated).toEqual([]);
  });

  it.each([
    ['visitKinds', visitKinds],
    ['visitStates', visitStates],
    ['finishes', finishes],
    ['placingMethods', placingMethods],
    ['jointings', jointings],
    ['roles', roles],
    ['channels', channels],
    ['noticeStates', noticeStates],
  ] as const)('name every one of %s', (key, values) => {
    expect(Object.keys(en[key]).toSorted()).toEqual([...values].toSorted());
  });
});
