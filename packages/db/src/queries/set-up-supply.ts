import type { Cement, EquipmentKind } from '@strikeboard/domain/vocabulary';
import { and, asc, eq, isNull } from 'drizzle-orm';
import type { Tx } from '../client.ts';
import { Conflict, constraintOf, NotFound } from '../errors.ts';
import { newId } from '../ids.ts';
import { currentCompany } from '../tables/columns.ts';
import { equipment, mixes, plants } from '../tables/index.ts';

/** What a plant's form holds. Yards are exact decimals as text. */
export interface PlantFields {
  name: string;
  /** IANA zone. */
  zone: string;
  latDeg: number | null;
  lonDeg: number | null;
  maxYd3PerHour: string | null;
  /** Smallest load without a short-load charge. */
  shortLoadYd3: string | null;
  /** The step in which yards are ordered. */
  orderStepYd3: string;
  /** Seven entries, Monday first: first and last load in minutes of the plant's day; null: closed. */
  hours: ({ fromMin: number; untilMin: number } | null)[];
  /** `YYYY-MM-DD`. */
  closedDays: string[];
  orderEmail: string | null;
  orderPhoneE164: string | null;
}
export interface PlantSetUp extends PlantFields {
  id: string;
  endedMs: number | null;
}

/** What a mix's form holds. */
export interface MixFields {
  plantId: string;
  code: string;
  name: string;
  strengthPsi: number;
  slumpIn: string | null;
  cement: Cement;
  /** Minutes from batching to the end of discharge; null: the company's rule. */
  dischargeLimitMin: number | null;
}
export interface MixSetUp extends MixFields {
  id: string;
  endedMs: number | null;
}

/** What the form of a piece of equipment holds. */
export interface EquipmentFields {
  kind: EquipmentKind;
  name: string;
  /** For pumps: whether it is a boom. */
  boom: boolean;
  reachFt: string | null;
  outputYd3PerHour: string | null;
  setUpMin: number;
  washOutMin: number;
  travelMin: number;
  operatorEmail: string | null;
  operatorPhoneE164: string | null;
}
export interface EquipmentSetUp extends EquipmentFields {
  id: string;
  endedMs: number | null;
}

/** Plants by name; with `ended` those no longer used too. */
export async function listPlants(tx: Tx, which = { ended: false }): Promise<PlantSetUp[]> {
  const rows = await tx
    .select()
    .from(plants)
    .where(and(eq(plants.companyId, currentCompany), which.ended ? undefined : isNull(plants.endedAt)))
    .orderBy(asc(plants.name));
  return rows.map(withoutKeys);
}

/** Mixes by code; with `ended` those no longer carried too. */
export async function listMixes(tx: Tx, which = { ended: false }): Promise<MixSetUp[]> {
  const rows = await tx
    .select()
    .from(mixes)
    .where(and(eq(mixes.companyId, currentCompany), which.ended ? undefined : isNull(mixes.endedAt)))
    .orderBy(asc(mixes.code));
  return rows.map(withoutKeys);
}

/** Equipment by name; with `ended` what is no longer there too. */
export async function listEquipment(tx: Tx, which = { ended: false }): Promise<EquipmentSetUp[]> {
  const rows = await tx
    .select()
    .from(equipment)
    .where(and(eq(equipment.companyId, currentCompany), which.ended ? undefined : isNull(equipment.endedAt)))
    .orderBy(asc(equipment.name));
  return rows.map(withoutKeys);
}

/** Adds a plant and returns its id. @throws Conflict `name-taken` */
export async function createPlant(tx: Tx, plant: PlantFields): Promise<string> {
  const id = newId();
  await refusing(plant, () => tx.insert(plants).values({ companyId: currentCompany, id, ...plant }));
  return id;
}

/** Adds a mix to a plant and returns its id. @throws NotFound (plant); Conflict `name-taken` */
export async function createMix(tx: Tx, mix: MixFields): Promise<string> {
  const id = newId();
  await refusing(mix, () => tx.insert(mixes).values({ companyId: currentCompany, id, ...mix }));
  return id;
}

/** Adds a piece of equipment and returns its id. @throws Conflict `name-taken` */
export async function createEquipment(tx: Tx, piece: EquipmentFields): Promise<string> {
  const id = newId();
  await refusing(piece, () => tx.insert(equipment).values({ companyId: currentCompany, id, ...piece }));
  return id;
}

/** Changes a plant; fields left out stay. @throws NotFound; Conflict `name-taken` */
export async function editPlant(tx: Tx, edit: { id: string; fields: Partial<PlantFields> }): Promise<void> {
  const isIt = and(eq(plants.companyId, currentCompany), eq(plants.id, edit.id));
  if (isEmpty(edit.fields)) return requireOne('plant', edit.id, await tx.select().from(plants).where(isIt));
  const changed = await refusing(edit.fields, () =>
    tx.update(plants).set(edit.fields).where(isIt).returning({ id: plants.id }),
  );
  requireOne('plant', edit.id, changed);
}

/** Changes a mix; fields left out stay, and it stays with its plant. @throws NotFound; Conflict `name-taken` */
export async function editMix(
  tx: Tx,
  edit: { id: string; fields: Partial<Omit<MixFields, 'plantId'>> },
): Promise<void> {
  const isIt = and(eq(mixes.companyId, currentCompany), eq(mixes.id, edit.id));
  if (isEmpty(edit.fields)) return requireOne('mix', edit.id, await tx.select().from(mixes).where(isIt));
  const changed = await refusing(edit.fields, () =>
    tx.update(mixes).set(edit.fields).where(isIt).returning({ id: mixes.id }),
  );
  requireOne('mix', edit.id, changed);
}

/** Changes a piece of equipment; fields left out stay. @throws NotFound; Conflict `name-taken` */
export async function editEquipment(
  tx: Tx,
  edit: { id: string; fields: Partial<EquipmentFields> },
): Promise<void> {
  const isIt = and(eq(equipment.companyId, currentCompany), eq(equipment.id, edit.id));
  if (isEmpty(edit.fields)) {
    return requireOne('equipment', edit.id, await tx.select().from(equipment).where(isIt));
  }
  const changed = await refusing(edit.fields, () =>
    tx.update(equipment).set(edit.fields).where(isIt).returning({ id: equipment.id }),
  );
  requireOne('equipment', edit.id, changed);
}

/** Takes a plant, mix or piece of equipment out of use from now on; what is booked stays. @throws NotFound */
export async function endSupply(
  tx: Tx,
  end: { kind: 'plant' | 'mix' | 'equipment'; id: string; nowMs: number },
): Promise<void> {
  const table = { plant: plants, mix: mixes, equipment }[end.kind];
  const ended = await tx
    .update(table)
    .set({ endedAt: new Date(end.nowMs) })
    .where(and(eq(table.companyId, currentCompany), eq(table.id, end.id), isNull(table.endedAt)))
    .returning({ id: table.id });
  requireOne(end.kind, end.id, ended);
}

function withoutKeys<T extends { companyId: string; createdAt: Date; endedAt: Date | null }>(
  row: T,
): Omit<T, 'companyId' | 'createdAt' | 'endedAt'> & { endedMs: number | null } {
  const { companyId: _, createdAt: __, endedAt, ...fields } = row;
  return { ...fields, endedMs: endedAt?.getTime() ?? null };
}

/** Drizzle refuses an update that sets nothing. */
function isEmpty(fields: object): boolean {
  return Object.values(fields).every((value) => value === undefined);
}

function requireOne(what: string, id: string, rows: readonly unknown[]): void {
  if (rows.length !== 1) throw new NotFound(what, id);
}

async function refusing<T>(
  of: { name?: string; code?: string; plantId?: string },
  write: () => Promise<T>,
): Promise<T> {
  try {
    return await write();
  } catch (error) {
    const constraint = constraintOf(error);
    if (constraint === 'mixes_plant_fk') throw new NotFound('plant', of.plantId ?? '');
    if (constraint !== null && ['plants_name', 'mixes_code', 'equipment_name'].includes(constraint)) {
      throw new Conflict('name-taken', { name: of.code ?? of.name });
    }
    throw error;
  }
}
