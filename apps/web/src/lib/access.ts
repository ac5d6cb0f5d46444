/**
 * Who may open what, in one place. Endpoints say it in their contracts, pages in the list below. What is not
 * listed is open to nobody.
 */

import type { Role } from '@strikeboard/domain/vocabulary';
import { type Access, type Method, matchPath } from './api/contract.ts';
import { allContracts } from './api/schemas/all.ts';

interface Rule {
  path: string;
  methods: readonly string[];
  access: Access;
}

const office: readonly Role[] = ['owner', 'dispatcher'];
const boardReaders: readonly Role[] = ['owner', 'dispatcher', 'foreman'];
const everyMember: readonly Role[] = ['owner', 'dispatcher', 'foreman', 'finisher', 'sub'];

/** Pages, and endpoints outside /api or with no contract of their own. */
export const pageRules: readonly Rule[] = [
  { path: '/', methods: ['GET'], access: 'signed-in' },
  { path: '/me', methods: ['GET', 'POST'], access: 'signed-in' },
  { path: '/sign-in', methods: ['GET', 'POST'], access: 'open' },
  { path: '/sign-out', methods: ['POST'], access: 'open' },
  { path: '/l/{token}', methods: ['GET', 'POST'], access: 'open' },
  { path: '/problems/{code}', methods: ['GET'], access: 'open' },
  { path: '/healthz', methods: ['GET'], access: 'open' },
  { path: '/api/openapi.json', methods: ['GET'], access: 'open' },
  { path: '/api/auth/{action}', methods: ['GET', 'POST'], access: 'open' },
  { path: '/api/auth/{action}/{provider}', methods: ['GET', 'POST'], access: 'open' },
  { path: '/403', methods: ['GET'], access: 'open' },
  { path: '/404', methods: ['GET'], access: 'open' },
  { path: '/500', methods: ['GET'], access: 'open' },
  { path: '/{slug}', methods: ['GET'], access: everyMember },
  { path: '/{slug}/board', methods: ['GET'], access: boardReaders },
  { path: '/{slug}/notices', methods: ['GET'], access: office },
  { path: '/{slug}/import', methods: ['GET'], access: office },
  { path: '/{slug}/yard-sheet', methods: ['GET'], access: office },
  { path: '/{slug}/set-up', methods: ['GET'], access: office },
  { path: '/{slug}/set-up/{kind}', methods: ['GET', 'POST'], access: office },
];

const apiRules: readonly Rule[] = allContracts.map(({ path, method, access }) => ({
  path,
  methods: [method],
  access,
}));

/** A path without names in braces wins over one with, part by part: `/me` is never a company's slug. */
const rules = [...pageRules, ...apiRules].toSorted((a, b) => (sortKey(a.path) < sortKey(b.path) ? -1 : 1));

/** Sorts by code points, in which `~` comes after every letter; a locale's order puts it before them. */
function sortKey(path: string): string {
  return path.replaceAll(/\{\w+\}/g, '~');
}

export type Found =
  | { kind: 'rule'; access: Access; slug: string | null }
  | { kind: 'method'; allowed: string[] }
  | { kind: 'none' };

/** What an address and method ask for; HEAD is taken as GET. */
export function findAccess(pathname: string, method: string): Found {
  const wanted = method === 'HEAD' ? 'GET' : method;
  const matches = rules.flatMap((rule) => {
    const params = matchPath(rule.path, pathname);
    return params ? [{ rule, params }] : [];
  });
  // Only the rules of the most literal path count, else a slug rule could answer for another address.
  const [first] = matches;
  if (!first) return { kind: 'none' };
  const best = matches.filter(({ rule }) => sortKey(rule.path) === sortKey(first.rule.path));
  const found = best.find(({ rule }) => rule.methods.includes(wanted));
  if (found) return { kind: 'rule', access: found.rule.access, slug: found.params.slug ?? null };
  return { kind: 'method', allowed: best.flatMap(({ rule }) => rule.methods) };
}

/** Whether a role may open a company's page, so that navigation shows no door that is shut. */
export function mayOpen(pathname: string, role: Role, method: Method = 'GET'): boolean {
  const found = findAccess(pathname, method);
  return found.kind === 'rule' && (typeof found.access === 'string' || found.access.includes(role));
}
