import { fold } from '@strikeboard/domain/intake/text';
import { and, asc, eq, gt, isNull, lt, lte, or, sql } from 'drizzle-orm';
import type { Tx } from '../client.ts';
import { Conflict, constraintOf, NotFound } from '../errors.ts';
import { newId } from '../ids.ts';
import { currentCompany } from '../tables/columns.ts';
import { crewMemberships, crews, members } from '../tables/index.ts';
import { endPlacesInCrews } from './set-up.ts';

/** A crew with its people at one instant. */
export interface CrewSetUp {
  id: string;
  name: string;
  foremanId: string | null;
  sortOrder: number;
  endedMs: number | null;
  memberIds: string[];
}

/** Crews in the order of their lanes, with who is on them at an instant; with `ended` those that are no more too. */
export async function listCrews(tx: Tx, which: { atMs: number; ended?: boolean }): Promise<CrewSetUp[]> {
  const at = new Date(which.atMs);
  const rows = await tx
    .select()
    .from(crews)
    .where(and(eq(crews.companyId, currentCompany), which.ended === true ? undefined : isNull(crews.endedAt)))
    .orderBy(asc(crews.sortOrder), asc(crews.name));
  const places = await tx
    .select({ crewId: crewMemberships.crewId, personId: crewMemberships.personId })
    .from(crewMemberships)
    .innerJoin(
      members,
      and(eq(members.companyId, crewMemberships.companyId), eq(members.personId, crewMemberships.personId)),
    )
    .where(and(eq(crewMemberships.companyId, currentCompany), standsAt(at)))
    .orderBy(asc(members.name));
  return rows.map(({ id, name, foremanId, sortOrder, endedAt }) => ({
    id,
    name,
    foremanId,
    sortOrder,
    endedMs: endedAt?.getTime() ?? null,
    memberIds: places.filter((place) => place.crewId === id).map((place) => place.personId),
  }));
}

/**
 * Adds a crew at the foot of the board and returns its id.
 * @throws Conflict `name-taken` when a crew is called so, letter case and accents aside
 * @throws NotFound when the foreman does not belong to the company
 */
export async function createCrew(tx: Tx, crew: { name: string; foremanId: string | null }): Promise<string> {
  const id = newId();
  const sortOrder = sql`(select coalesce(max(c.sort_order), 0) + 1 from crews c where c.company_id = ${currentCompany})`;
  await refusing(crew, async () => {
    await tx.insert(crews).values({
      companyId: currentCompany,
      id,
      name: crew.name,
      naturalKey: fold(crew.name),
      foremanId: crew.foremanId,
      sortOrder,
    });
  });
  return id;
}

/**
 * Changes a crew; fields left out stay.
 * @throws NotFound when there is no such crew or foreman
 * @throws Conflict `name-taken`
 */
export async function editCrew(
  tx: Tx,
  edit: { crewId: string; fields: { name?: string; foremanId?: string | null; sortOrder?: number } },
): Promise<void> {
  const { name, foremanId, sortOrder } = edit.fields;
  const changed = await refusing({ name: name ?? '', foremanId: foremanId ?? null }, () =>
    tx
      .update(crews)
      .set({
        name: name ?? sql`${crews.name}`,
        naturalKey: name === undefined ? undefined : fold(name),
        foremanId,
        sortOrder,
      })
      .where(isCrew(edit.crewId)),
  );
  if (changed.rowCount !== 1) throw new NotFound('crew', edit.crewId);
}

/**
 * Takes a crew's lane off the board from now on and ends its people's places in it. Its visits stay where they are.
 * @throws NotFound when there is no such crew
 */
export async function endCrew(tx: Tx, end: { crewId: string; nowMs: number }): Promise<void> {
  const now = new Date(end.nowMs);
  const ended = await tx
    .update(crews)
    .set({ endedAt: now })
    .where(and(isCrew(end.crewId), isNull(crews.endedAt)));
  if (ended.rowCount !== 1) throw new NotFound('crew', end.crewId);
  await endPlacesInCrews(tx, { crewId: end.crewId, at: now });
}

/**
 * Puts a person on a crew from an instant on and takes them off any other from then on, for a person is on one crew
 * at a time. Does nothing when they are on it already.
 * @throws NotFound when crew or person is not the company's
 */
export async function joinCrew(
  tx: Tx,
  join: { crewId: string; personId: string; fromMs: number },
): Promise<void> {
  const { crewId, personId } = join;
  const from = new Date(join.fromMs);
  const [there] = await tx
    .select({ id: crewMemberships.id })
    .from(crewMemberships)
    .where(and(isPlace(join), standsAt(from)));
  if (there) return;
  await endPlacesInCrews(tx, { personId, at: from });
  await refusing({ name: '', crewId, personId, foremanId: null }, async () => {
    await tx
      .insert(crewMemberships)
      .values({ companyId: currentCompany, id: newId(), crewId, personId, startsAt: from });
  });
}

/**
 * Ends a person's place on a crew.
 * @throws NotFound when they are not on it at that instant
 */
export async function leaveCrew(
  tx: Tx,
  leave: { crewId: string; personId: string; atMs: number },
): Promise<void> {
  const at = new Date(leave.atMs);
  const ended = await tx
    .update(crewMemberships)
    .set({ endsAt: at })
    .where(and(isPlace(leave), lt(crewMemberships.startsAt, at), standsAt(at)));
  if (ended.rowCount === 0) throw new NotFound('crew-member', leave.personId);
}

function isCrew(crewId: string) {
  return and(eq(crews.companyId, currentCompany), eq(crews.id, crewId));
}

function isPlace(of: { crewId: string; personId: string }) {
  return and(
    eq(crewMemberships.companyId, currentCompany),
    eq(crewMemberships.crewId, of.crewId),
    eq(crewMemberships.personId, of.personId),
  );
}

function standsAt(at: Date) {
  return and(
    lte(crewMemberships.startsAt, at),
    or(isNull(crewMemberships.endsAt), gt(crewMemberships.endsAt, at)),
  );
}

async function refusing<T>(
  of: { name: string; foremanId: string | null; crewId?: string; personId?: string },
  write: () => Promise<T>,
): Promise<T> {
  try {
    return await write();
  } catch (error) {
    const constraint = constraintOf(error);
    if (constraint === 'crews_natural_key') throw new Conflict('name-taken', { name: of.name });
    if (constraint === 'crews_foreman') throw new NotFound('person', of.foremanId ?? '');
    if (constraint === 'crew_memberships_crew_fk') throw new NotFound('crew', of.crewId ?? '');
    if (constraint === 'crew_memberships_person_fk') throw new NotFound('person', of.personId ?? '');
    throw error;
  }
}
