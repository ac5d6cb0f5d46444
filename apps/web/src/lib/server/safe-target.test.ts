import { describe, expect, it } from 'vitest';
import { safeTarget } from './safe-target.ts';

describe('safeTarget (open redirects: OWASP Unvalidated Redirects Cheat Sheet, published)', () => {
  it.each([
    [null, '/'],
    ['/cedar-flat/board?from=2026-03-09', '/cedar-flat/board?from=2026-03-09'],
    ['https://elsewhere.example.com/', '/'],
    ['//elsewhere.example.com/', '/'],
    ['/\\elsewhere.example.com/', '/'],
    ['/\t/elsewhere.example.com/', '/'],
    ['javascript:alert(1)', '/'],
    ['cedar-flat/board', '/'],
  ])('%j goes to %s', (to, target) => {
    expect(safeTarget(to, 'https://board.example.com')).toBe(target);
  });
});
