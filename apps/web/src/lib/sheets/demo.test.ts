import { readFileSync } from 'node:fs';
import type { IntakeKind } from '@strikeboard/domain/intake/fields';
import { fold } from '@strikeboard/domain/intake/text';
import { daysBetween, weekdayOf } from '@strikeboard/domain/zone';
import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { type ImportPreview, previewImport } from './preview-import.ts';

const demo = (path: string): Buffer => readFileSync(new URL(`../../../demo/${path}`, import.meta.url));
const { baseDay, companies, accounts } = z
  .object({
    baseDay: z.string(),
    companies: z.array(
      z.object({
        slug: z.string(),
        zone: z.string(),
        files: z.object({ people: z.string(), crews: z.string(), sites: z.string(), pours: z.string() }),
      }),
    ),
    accounts: z.array(z.object({ email: z.string(), role: z.string(), companies: z.array(z.string()) })),
  })
  .parse(JSON.parse(demo('accounts.json').toString('utf8')));

type Company = (typeof companies)[number];
function read<K extends IntakeKind>(company: Company, kind: K): Promise<ImportPreview<K>> {
  const fileName = company.files[kind];
  const options = { referenceDay: baseDay, zone: company.zone, country: 'US' } as const;
  return previewImport({ bytes: demo(fileName), fileName, kind, options });
}
const company = (slug: string): Company => {
  const found = companies.find((one) => one.slug === slug);
  if (!found) throw new Error(`no demo company ${slug}`);
  return found;
};
const [cedar, prairie] = [company('cedar-flat'), company('prairie-line')];

// The demo's own scenario; nothing outside to check it against but itself.
describe.each([cedar, prairie])('the sheets of $slug', (one) => {
  it.each(['people', 'crews', 'sites', 'pours'] as const)('import without an error: %s', async (kind) => {
    const result = await read(one, kind);
    expect(result.problems.filter((problem) => problem.severity === 'error')).toEqual([]);
    expect(result.records.length).toBeGreaterThan(1);
  });

  it('fit together', async () => {
    const [people, crews, sites, pours] = await Promise.all([
      read(one, 'people'),
      read(one, 'crews'),
      read(one, 'sites'),
      read(one, 'pours'),
    ]);
    const names = new Set(people.records.map((person) => fold(person.name)));
    const crewNames = new Set(crews.records.map((crew) => crew.naturalKey));
    const siteNames = new Set(sites.records.map((site) => fold(site.name)));
    for (const crew of crews.records) {
      for (const name of [...crew.memberNames, crew.foremanName ?? crew.memberNames[0] ?? ''])
        expect(names).toContain(fold(name));
    }
    for (const person of people.records)
      if (person.crewName !== null) expect(crewNames).toContain(fold(person.crewName));
    for (const pour of pours.records) expect(siteNames).toContain(fold(pour.siteName ?? ''));
    for (const site of sites.records) expect(site.latDeg).not.toBeNull();
  });

  it('want their pours within two weeks of the base day', async () => {
    expect(weekdayOf(baseDay)).toBe(1);
    const days = (await read(one, 'pours')).records.flatMap((pour) => pour.wantedOn ?? []);
    for (const day of days)
      expect(daysBetween(baseDay, day)).toSatisfy((after: number) => after >= 0 && after < 14);
    expect(days.length).toBeGreaterThan(5);
  });
});

describe('the demo companies', () => {
  it('have the people that the scenario asks for', async () => {
    const { records } = await read(cedar, 'people');
    const count = (role: string): number => records.filter((person) => person.role === role).length;
    expect(['owner', 'dispatcher', 'foreman', 'finisher', 'sub'].map(count)).toEqual([1, 2, 3, 16, 4]);
    const spanish = records.filter((person) => person.language === 'es').length;
    expect(Math.abs(spanish - records.length / 2)).toBeLessThan(3);
    expect((await read(cedar, 'crews')).records).toHaveLength(4);
    expect((await read(prairie, 'crews')).records).toHaveLength(2);
    expect((await read(cedar, 'sites')).records).toHaveLength(18);
    expect((await read(cedar, 'pours')).records).toHaveLength(26);
  });

  it('share one sub and no other number or address', async () => {
    const here = (await read(cedar, 'people')).records;
    const there = (await read(prairie, 'people')).records;
    for (const person of [...here, ...there]) {
      // 555-0100 to 555-0199 and example.com are kept free for fiction (NANPA; RFC 2606).
      expect(person.phoneE164).toMatch(/^\+1(970|316)55501\d\d$/);
      expect(person.email).toMatch(/@example\.com$/);
    }
    const shared = here.filter((person) =>
      there.some((other) => other.email === person.email || other.phoneE164 === person.phoneE164),
    );
    expect(shared.map((person) => person.role)).toEqual(['sub']);
    const twin = there.find((other) => other.email === shared[0]?.email);
    expect(twin).toMatchObject({ role: 'sub', phoneE164: shared[0]?.phoneE164, name: shared[0]?.name });
    for (const list of [here, there])
      expect(new Set(list.map((person) => person.phoneE164)).size).toBe(list.length);
  });

  it('have one site in another zone, and pours of every finish and way of placing', async () => {
    const sites = (await read(cedar, 'sites')).records;
    expect(sites.flatMap((site) => site.timeZone ?? [])).toEqual(['America/Chicago']);
    const { records } = await read(cedar, 'pours');
    expect(new Set(records.map((pour) => pour.finish)).size).toBe(6);
    expect(new Set(records.map((pour) => pour.placingMethod)).size).toBe(4);
    expect(records.some((pour) => pour.wantedOn === null)).toBe(true);
  });

  it('let people sign in who are in their sheets with that role', async () => {
    for (const account of accounts) {
      for (const slug of account.companies) {
        const person = (await read(company(slug), 'people')).records.find(
          (one) => one.email === account.email,
        );
        expect(person?.role, account.email).toBe(account.role);
      }
    }
  });
});
