import { inCompany } from '@strikeboard/db/client';
import { Conflict, NotFound } from '@strikeboard/db/errors';
import { newId } from '@strikeboard/db/ids';
import { acceptPeople } from '@strikeboard/db/queries/import-people';
import { resolveReferences } from '@strikeboard/db/queries/imports';
import { issueLink, openLink } from '@strikeboard/db/queries/links';
import { editMember, endMember, listMembers, readCompany } from '@strikeboard/db/queries/set-up';
import {
  createCrew,
  editCrew,
  endCrew,
  joinCrew,
  leaveCrew,
  listCrews,
} from '@strikeboard/db/queries/set-up-crews';
import { createSite, editSite, endSite, listSites } from '@strikeboard/db/queries/set-up-sites';
import {
  createEquipment,
  createMix,
  createPlant,
  editEquipment,
  editMix,
  editPlant,
  endSupply,
  listEquipment,
  listMixes,
  listPlants,
} from '@strikeboard/db/queries/set-up-supply';
import { crewMemberships } from '@strikeboard/db/tables';
import { InputProblem } from '@strikeboard/domain/problem';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import {
  addPerson,
  holdShift,
  makeCompany,
  openTestDatabases,
  placePour,
  SITE_ZONE,
  type TestCompany,
  type TestDatabases,
} from './company-fixture.ts';

const HOUR_MS = 3_600_000;
const DAY_MS = 24 * HOUR_MS;
/** Noon on a Friday in Chicago, where the office is; the machine's zone is Tokyo. */
const NOW_MS = Date.parse('2026-03-06T18:00:00Z');

let db: TestDatabases;
let company: TestCompany;

beforeAll(async () => {
  db = await openTestDatabases();
  company = await makeCompany(db, { slug: 'set-up-test', name: 'Set-up Test' });
});
afterAll(() => db.close());

const inside = <T>(work: Parameters<typeof inCompany<T>>[2]): Promise<T> =>
  inCompany(db.web, { companyId: company.companyId, personId: company.ownerId }, work);

describe('a company', () => {
  it('has the rules it set over the defaults, and a slug of its own', async () => {
    expect(await inside((tx) => readCompany(tx))).toMatchObject({
      slug: 'set-up-test',
      zone: 'America/Chicago',
      rules: { units: 'us', wastePercent: 5 },
    });
    await expect(makeCompany(db, { slug: 'set-up-test', name: 'Second' })).rejects.toMatchObject({
      code: 'slug-taken',
    });
  });
});

describe('members', () => {
  it('are edited field by field', async () => {
    const personId = await addPerson(db.web, company, { name: 'Edith Edit', phoneE164: '+19705550150' });
    await inside((tx) => editMember(tx, { personId, fields: { role: 'foreman', skills: ['broom'] } }));
    await inside((tx) => editMember(tx, { personId, fields: {} }));
    const members = await inside((tx) => listMembers(tx));
    expect(members.find((one) => one.personId === personId)).toMatchObject({
      ...{ name: 'Edith Edit', role: 'foreman', phoneE164: '+19705550150', skills: ['broom'], endedMs: null },
    });
    await expect(inside((tx) => editMember(tx, { personId: newId(), fields: {} }))).rejects.toThrow(NotFound);
    const demoted = inside((tx) =>
      editMember(tx, { personId: company.ownerId, fields: { role: 'finisher' } }),
    );
    await expect(demoted).rejects.toMatchObject({ code: 'last-owner' });
  });

  it('leave their crews and links when they end, and what they still hold is named', async () => {
    const personId = await addPerson(db.web, company, { name: 'Les Leaving' });
    const during = { startMs: NOW_MS + DAY_MS, endMs: NOW_MS + DAY_MS + 8 * HOUR_MS };
    const { visitId } = await placePour(db.web, company, { during });
    await holdShift(db.web, company, { visitId, personId, during });
    const { crewId } = company;
    await inside((tx) => joinCrew(tx, { crewId, personId, fromMs: NOW_MS - DAY_MS }));
    await inside((tx) => editCrew(tx, { crewId, fields: { foremanId: personId } }));
    const token = await inside((tx) =>
      issueLink(tx, { visitId, personId, nowMs: NOW_MS, expiresMs: NOW_MS + DAY_MS }),
    );
    expect(await inside((tx) => endMember(tx, { personId, nowMs: NOW_MS }))).toEqual({
      heldVisitIds: [visitId],
    });
    const [crew] = await inside((tx) => listCrews(tx, { atMs: NOW_MS }));
    expect(crew).toMatchObject({ foremanId: null, memberIds: [] });
    expect(await openLink(db.web, token, NOW_MS)).toBeNull();
    expect((await inside((tx) => listMembers(tx))).map((one) => one.personId)).not.toContain(personId);
    const all = await inside((tx) => listMembers(tx, { ended: true }));
    expect(all.find((one) => one.personId === personId)?.endedMs).toBe(NOW_MS);
  });
});

describe('crews', () => {
  it('have a person on one at a time, over time, and take back a place that has not begun', async () => {
    const personId = await addPerson(db.web, company, { name: 'Mo Moving' });
    const other = await inside((tx) => createCrew(tx, { name: 'Other crew', foremanId: null }));
    const at = (atMs: number) =>
      inside(async (tx) =>
        (await listCrews(tx, { atMs }))
          .filter((crew) => crew.memberIds.includes(personId))
          .map((crew) => crew.id),
      );
    const join = (crewId: string, fromMs: number) =>
      inside((tx) => joinCrew(tx, { crewId, personId, fromMs }));
    await join(company.crewId, NOW_MS);
    await join(company.crewId, NOW_MS);
    await join(other, NOW_MS + 2 * DAY_MS);
    expect([await at(NOW_MS - 1), await at(NOW_MS), await at(NOW_MS + 2 * DAY_MS)]).toEqual([
      [],
      [company.crewId],
      [other],
    ]);
    await join(other, NOW_MS + DAY_MS);
    expect([await at(NOW_MS + DAY_MS - 1), await at(NOW_MS + DAY_MS)]).toEqual([[company.crewId], [other]]);
    await inside((tx) => leaveCrew(tx, { crewId: other, personId, atMs: NOW_MS + 3 * DAY_MS }));
    expect(await at(NOW_MS + 3 * DAY_MS)).toEqual([]);
    const rows = await inside((tx) => tx.select().from(crewMemberships));
    expect(rows.filter((row) => row.personId === personId)).toHaveLength(2);
    const notThere = inside((tx) => leaveCrew(tx, { crewId: other, personId, atMs: NOW_MS + 3 * DAY_MS }));
    await expect(notThere).rejects.toThrow(NotFound);
  });

  it('take a person whom an import names from when they left their last crew that day', async () => {
    const name = 'Ira Import';
    const personId = await addPerson(db.web, company, { name });
    await inside((tx) => joinCrew(tx, { crewId: company.crewId, personId, fromMs: NOW_MS - DAY_MS }));
    await inside((tx) => leaveCrew(tx, { crewId: company.crewId, personId, atMs: NOW_MS - HOUR_MS }));
    const records = [
      {
        ...{
          naturalKey: 'name:ira import',
          line: 2,
          name,
          phoneE164: null,
          email: null,
          role: 'finisher' as const,
        },
        ...{ crewName: 'Import crew', language: null, skills: [] },
      },
    ];
    const context = { nowMs: NOW_MS, zone: 'America/Chicago', wastePercent: 5, orderStepYd3: 0.25 };
    expect(await inside((tx) => acceptPeople(tx, records, context))).toEqual({
      created: 0,
      updated: 1,
      unchanged: 0,
    });
    const rows = await inside((tx) => tx.select().from(crewMemberships));
    const places = rows
      .filter((row) => row.personId === personId)
      .toSorted((a, b) => +a.startsAt - +b.startsAt);
    expect(places.map((row) => row.startsAt.getTime())).toEqual([NOW_MS - DAY_MS, NOW_MS - HOUR_MS]);
    const { unchanged } = await inside((tx) =>
      resolveReferences(tx, { kind: 'people', records }, { nowMs: NOW_MS }),
    );
    expect(unchanged).toBe(1);
  });

  it('have names of their own, foremen of the company, and an end', async () => {
    const twin = inside((tx) => createCrew(tx, { name: 'CREW 1', foremanId: null }));
    await expect(twin).rejects.toMatchObject({ code: 'name-taken' });
    const foreign = inside((tx) => createCrew(tx, { name: 'New', foremanId: newId() }));
    await expect(foreign).rejects.toThrow(NotFound);
    const crewId = await inside((tx) => createCrew(tx, { name: 'Short-lived', foremanId: null }));
    const personId = await addPerson(db.web, company, { name: 'Shorty' });
    await inside((tx) => joinCrew(tx, { crewId, personId, fromMs: NOW_MS }));
    await inside((tx) => endCrew(tx, { crewId, nowMs: NOW_MS + HOUR_MS }));
    const crews = await inside((tx) => listCrews(tx, { atMs: NOW_MS + HOUR_MS, ended: true }));
    expect(crews.find((crew) => crew.id === crewId)).toMatchObject({
      memberIds: [],
      endedMs: NOW_MS + HOUR_MS,
    });
    await expect(inside((tx) => endCrew(tx, { crewId, nowMs: NOW_MS }))).rejects.toThrow(NotFound);
  });
});

describe('sites', () => {
  const site = {
    ...{ name: 'Mill', address: '1 Mill Street', zone: SITE_ZONE, latDeg: null, lonDeg: null },
    ...{ permittedFromMin: 420, permittedUntilMin: 1140, customerName: null, accessNotes: null },
  };

  it('are one by name and address, spelling aside, and change field by field', async () => {
    const siteId = await inside((tx) => createSite(tx, site));
    const twin = inside((tx) => createSite(tx, { ...site, name: 'MILL', address: '1 Mill St.' }));
    await expect(twin).rejects.toThrow(Conflict);
    await inside((tx) => editSite(tx, { siteId, fields: { accessNotes: 'gate 4411' } }));
    const found = (await inside((tx) => listSites(tx))).find((one) => one.id === siteId);
    expect(found).toEqual({ ...site, id: siteId, accessNotes: 'gate 4411', endedMs: null });
    await inside((tx) => endSite(tx, { siteId, nowMs: NOW_MS }));
    expect((await inside((tx) => listSites(tx))).map((one) => one.id)).not.toContain(siteId);
    await expect(inside((tx) => endSite(tx, { siteId, nowMs: NOW_MS }))).rejects.toThrow(NotFound);
  });

  it.each([
    ['zone', { zone: 'Mountain' }],
    ['lonDeg', { latDeg: 40 }],
    ['latDeg', { latDeg: 91, lonDeg: 0 }],
    ['permittedUntilMin', { permittedUntilMin: 420 }],
  ])('are refused with the field that cannot be: %s', async (field, fields) => {
    const refused = inside((tx) => createSite(tx, { ...site, name: field, ...fields }));
    await expect(refused).rejects.toBeInstanceOf(InputProblem);
    await expect(refused).rejects.toMatchObject({ field });
  });
});

describe('plants, mixes and equipment', () => {
  it('are made, changed, taken out of use, and have names of their own', async () => {
    const plant = {
      ...{ name: 'River plant', zone: SITE_ZONE, latDeg: null, lonDeg: null, maxYd3PerHour: '80' },
      ...{ shortLoadYd3: null, orderStepYd3: '0.25', hours: Array.from({ length: 7 }, () => null) },
      ...{ closedDays: ['2026-12-25'], orderEmail: null, orderPhoneE164: null },
    };
    const plantId = await inside((tx) => createPlant(tx, plant));
    await expect(inside((tx) => createPlant(tx, plant))).rejects.toMatchObject({ code: 'name-taken' });
    await inside((tx) => editPlant(tx, { id: plantId, fields: { maxYd3PerHour: '90.5' } }));
    await inside((tx) => editPlant(tx, { id: plantId, fields: {} }));
    expect(await inside((tx) => listPlants(tx))).toMatchObject([
      { id: plantId, maxYd3PerHour: '90.500', closedDays: ['2026-12-25'], endedMs: null },
    ]);

    const mix = {
      ...{ plantId, code: 'E40', name: 'Exterior 4000', strengthPsi: 4000, slumpIn: '4' },
      ...{ cement: 'type-i' as const, dischargeLimitMin: 90 },
    };
    const mixId = await inside((tx) => createMix(tx, mix));
    await expect(inside((tx) => createMix(tx, mix))).rejects.toMatchObject({ code: 'name-taken' });
    await expect(inside((tx) => createMix(tx, { ...mix, plantId: newId() }))).rejects.toThrow(NotFound);
    await inside((tx) => editMix(tx, { id: mixId, fields: { strengthPsi: 4500 } }));
    expect(await inside((tx) => listMixes(tx))).toMatchObject([{ id: mixId, strengthPsi: 4500 }]);

    const pump = {
      ...{
        kind: 'pump' as const,
        name: 'Boom 38',
        boom: true,
        reachFt: '125',
        outputYd3PerHour: '90',
        setUpMin: 30,
      },
      ...{ washOutMin: 30, travelMin: 30, operatorEmail: null, operatorPhoneE164: null },
    };
    const pumpId = await inside((tx) => createEquipment(tx, pump));
    await inside((tx) => editEquipment(tx, { id: pumpId, fields: { setUpMin: 45 } }));
    expect(await inside((tx) => listEquipment(tx))).toMatchObject([
      { id: pumpId, setUpMin: 45, reachFt: '125.0000' },
    ]);
    await expect(inside((tx) => editEquipment(tx, { id: newId(), fields: { setUpMin: 1 } }))).rejects.toThrow(
      NotFound,
    );

    await inside((tx) => endSupply(tx, { kind: 'equipment', id: pumpId, nowMs: NOW_MS }));
    await inside((tx) => endSupply(tx, { kind: 'mix', id: mixId, nowMs: NOW_MS }));
    await inside((tx) => endSupply(tx, { kind: 'plant', id: plantId, nowMs: NOW_MS }));
    expect(await inside((tx) => listEquipment(tx))).toEqual([]);
    expect(await inside((tx) => listEquipment(tx, { ended: true }))).toMatchObject([
      { id: pumpId, endedMs: NOW_MS },
    ]);
    await expect(inside((tx) => endSupply(tx, { kind: 'mix', id: mixId, nowMs: NOW_MS }))).rejects.toThrow(
      NotFound,
    );
  });
});
