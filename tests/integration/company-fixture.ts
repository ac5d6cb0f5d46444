import { type Database, inCompany, openDatabase } from '@strikeboard/db/client';
import { newId } from '@strikeboard/db/ids';
import { addMember, createCompany } from '@strikeboard/db/queries/set-up';
import { createCrew } from '@strikeboard/db/queries/set-up-crews';
import { createSite } from '@strikeboard/db/queries/set-up-sites';
import { offers, pours, shifts, visits } from '@strikeboard/db/tables';
import type { Interval } from '@strikeboard/domain/interval';
import type { Role, VisitState } from '@strikeboard/domain/vocabulary';
import { freshDatabase } from '@strikeboard/local-stack/test-database';

/** The sites of the fixtures; their people live elsewhere, and the machine is elsewhere again. */
export const SITE_ZONE = 'America/Denver';
export const OFFICE_ZONE = 'America/Chicago';

export interface TestDatabases {
  web: Database;
  worker: Database;
  owner: Database;
  close(): Promise<void>;
}

export async function openTestDatabases(): Promise<TestDatabases> {
  const { urls, close } = await freshDatabase();
  const [web, worker, owner] = [openDatabase(urls.web), openDatabase(urls.worker), openDatabase(urls.owner)];
  return {
    web,
    worker,
    owner,
    close: async () => {
      await Promise.all([web.close(), worker.close(), owner.close()]);
      await close();
    },
  };
}

export interface TestCompany {
  companyId: string;
  ownerId: string;
  slug: string;
  crewId: string;
  siteId: string;
}

/** A company with an owner, a crew and a site. */
export async function makeCompany(
  { owner, web }: TestDatabases,
  named: { slug: string; name: string; zone?: string },
): Promise<TestCompany> {
  const { companyId, ownerId } = await createCompany(owner, {
    slug: named.slug,
    name: named.name,
    zone: named.zone ?? OFFICE_ZONE,
    owner: { name: 'Olive Owner', email: `owner@${named.slug}.example.com`, phoneE164: null, language: 'en' },
  });
  const rows = await inCompany(web, { companyId, personId: ownerId }, async (tx) => ({
    crewId: await createCrew(tx, { name: 'Crew 1', foremanId: null }),
    siteId: await createSite(tx, {
      name: 'Alder Court',
      address: '412 Alder Ct, Fort Collins, CO 80521',
      zone: SITE_ZONE,
      latDeg: 40.5853,
      lonDeg: -105.0844,
      permittedFromMin: null,
      permittedUntilMin: null,
      customerName: null,
      accessNotes: null,
    }),
  }));
  return { companyId, ownerId, slug: named.slug, ...rows };
}

export function addPerson(
  db: Database,
  company: TestCompany,
  person: { name: string; role?: Role; email?: string | null; phoneE164?: string | null },
): Promise<string> {
  return inCompany(db, { companyId: company.companyId, personId: company.ownerId }, (tx) =>
    addMember(tx, {
      name: person.name,
      role: person.role ?? 'finisher',
      email: person.email ?? null,
      phoneE164: person.phoneE164 ?? null,
      language: 'en',
      skills: [],
    }),
  );
}

export interface PlacedPour {
  visitId: string;
  pourId: string;
}

/** A pour that stands on the company's crew, or waits when it has no time. */
export function placePour(
  db: Database,
  company: TestCompany,
  pour: {
    during: Interval | null;
    state?: VisitState;
    yd3?: string;
    crewId?: string;
    wantedOn?: string | null;
  },
): Promise<PlacedPour> {
  const { companyId, ownerId, siteId } = company;
  const [visitId, pourId] = [newId(), newId()];
  const orderedYd3 = pour.yd3 ?? '40';
  return inCompany(db, { companyId, personId: ownerId }, async (tx) => {
    await tx.insert(pours).values({
      companyId,
      id: pourId,
      siteId,
      name: 'Garage slab',
      naturalKey: pourId,
      orderedYd3,
      finish: 'broom',
      placingMethod: 'chute',
    });
    await tx.insert(visits).values({
      companyId,
      id: visitId,
      kind: 'pour',
      state: pour.during === null ? 'waiting' : (pour.state ?? 'firm'),
      siteId,
      crewId: pour.during === null ? null : (pour.crewId ?? company.crewId),
      pourId,
      partYd3: orderedYd3,
      title: 'Garage slab',
      during: pour.during,
      wantedOn: pour.wantedOn ?? null,
    });
    return { visitId, pourId };
  });
}

/** Puts a person on a visit. */
export async function holdShift(
  db: Database,
  company: TestCompany,
  shift: { visitId: string; personId: string; during: Interval },
): Promise<string> {
  const id = newId();
  const { companyId, ownerId } = company;
  await inCompany(db, { companyId, personId: ownerId }, (tx) =>
    tx.insert(shifts).values({ companyId, id, ...shift, held: shift.during }),
  );
  return id;
}

/** Asks a sub for a visit. */
export async function makeOffer(
  db: Database,
  company: TestCompany,
  offer: { visitId: string; personId: string; during: Interval },
): Promise<string> {
  const id = newId();
  const { companyId, ownerId } = company;
  await inCompany(db, { companyId, personId: ownerId }, (tx) =>
    tx.insert(offers).values({ companyId, id, ...offer, held: offer.during }),
  );
  return id;
}
