import { describe, expect, it } from 'vitest';
import { isFromHere } from './origin.ts';

const here = 'https://board.example.com';
const cases: [string, string, string, Record<string, string>, boolean][] = [
  [
    'a page of this site',
    'POST',
    '/api/cedar/pours',
    { 'sec-fetch-site': 'same-origin', origin: here },
    true,
  ],
  [
    'a page of another site',
    'POST',
    '/api/cedar/pours',
    { 'sec-fetch-site': 'cross-site', origin: here },
    false,
  ],
  ['a page of a sister site', 'POST', '/api/cedar/pours', { 'sec-fetch-site': 'same-site' }, false],
  ['an older browser here', 'POST', '/sign-in', { origin: here }, true],
  ['an older browser elsewhere', 'POST', '/sign-in', { origin: 'https://elsewhere.example.com' }, false],
  ['a sandboxed frame', 'POST', '/sign-in', { origin: 'null' }, false],
  ['a program', 'PATCH', '/api/cedar/pours/1', {}, true],
  ['reading from elsewhere', 'GET', '/api/cedar/board', { 'sec-fetch-site': 'cross-site' }, true],
  ['a provider', 'POST', '/api/sms/inbound', { origin: 'https://sms.example.com' }, true],
];

describe('isFromHere (Fetch Metadata Request Headers, W3C working draft, from memory)', () => {
  it.each(cases)('%s', (_, method, path, headers, expected) => {
    expect(isFromHere(new Request(`${here}${path}`, { method, headers }), here)).toBe(expected);
  });
});
