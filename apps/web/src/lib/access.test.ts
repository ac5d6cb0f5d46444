import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { roles } from '@strikeboard/domain/vocabulary';
import { describe, expect, it } from 'vitest';
import { findAccess, mayOpen, pageRules } from './access.ts';
import { matchPath } from './api/contract.ts';
import { allContracts } from './api/schemas/all.ts';

const pages = path.join(import.meta.dirname, '../pages');

/** Files under src/pages as addresses: `[slug]` and `[company]` are `{slug}`. */
const files = readdirSync(pages, { recursive: true, encoding: 'utf8' })
  .filter((name) => /\.(astro|ts)$/.test(name) && !/\.test\.ts$/.test(name))
  .map((name) => ({
    name,
    address: `/${name
      .replaceAll(path.sep, '/')
      .replace(/\.(astro|ts)$/, '')
      .replace(/(^|\/)index$/, '')
      .replaceAll('[company]', '{slug}')
      .replace(/\[(\w+)\]/g, '{$1}')}`,
  }));
const endpoints = files.filter(({ name }) => name.endsWith('.ts'));

describe('the access table (common practice, no source)', () => {
  it('finds the files it speaks of', () => {
    expect(files.length).toBeGreaterThan(30);
  });

  it.each(endpoints)('$name: each of its methods is in it', ({ name, address }) => {
    const source = readFileSync(path.join(pages, name), 'utf8');
    const methods = [...source.matchAll(/^export const (GET|POST|PUT|PATCH|DELETE|ALL)\b/gm)].map(
      ([, method]) => method,
    );
    expect(methods).not.toEqual([]);
    for (const method of methods) {
      const found = findAccess(address, String(method));
      expect(found, `${method} ${address}`).toMatchObject({ kind: 'rule' });
    }
  });

  it.each(files.filter(({ name }) => name.endsWith('.astro')))('$name is in it', ({ address }) => {
    expect(pageRules.map((rule) => rule.path)).toContain(address);
  });

  it('has a file for every contract', () => {
    const addresses = endpoints.map(({ address }) => address);
    for (const { path: contractPath } of allContracts) expect(addresses).toContain(contractPath);
  });

  it('opens nothing that is not listed', () => {
    expect(findAccess('/cedar-flat/payroll', 'GET')).toEqual({ kind: 'none' });
    expect(findAccess('/api/cedar-flat/people', 'GET')).toEqual({ kind: 'none' });
    expect(findAccess('/api/cedar-flat/board', 'DELETE')).toEqual({ kind: 'method', allowed: ['GET'] });
  });

  it('takes no slug for a fixed address, and no fixed address for a slug', () => {
    expect(findAccess('/me', 'GET')).toMatchObject({ access: 'signed-in', slug: null });
    expect(findAccess('/api/me/calendar', 'GET')).toMatchObject({ access: 'signed-in', slug: null });
    expect(findAccess('/cedar-flat/board', 'HEAD')).toMatchObject({ slug: 'cedar-flat' });
  });

  it('lets finishers and subs see no board, and only the office move it', () => {
    const who = (pathname: string, method: 'GET' | 'POST') =>
      roles.filter((role) => mayOpen(pathname, role, method));
    const visit = '/api/cedar-flat/visits/01990000-0000-7000-8000-000000000001';
    expect(who('/cedar-flat/board', 'GET')).toEqual(['owner', 'dispatcher', 'foreman']);
    expect(who(`${visit}/place`, 'POST')).toEqual(['owner', 'dispatcher']);
    expect(who('/cedar-flat/set-up/people', 'POST')).toEqual(['owner', 'dispatcher']);
  });
});

describe('matchPath (RFC 3986 percent-encoding)', () => {
  it.each([
    ['/api/{slug}/board', '/api/cedar-flat/board', { slug: 'cedar-flat' }],
    ['/api/{slug}/board', '/api/cedar-flat/board/', { slug: 'cedar-flat' }],
    ['/api/{slug}/board', '/api/cedar%20flat/board', { slug: 'cedar flat' }],
    ['/api/{slug}/board', '/api//board', null],
    ['/api/{slug}/board', '/api/%E0%A4%A/board', null],
    ['/', '/', {}],
  ])('%s takes %s', (template, pathname, params) => {
    expect(matchPath(template, pathname)).toEqual(params);
  });
});
