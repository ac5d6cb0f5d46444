/** Table rows as the domain's snapshot has them. */

import type {
  Booking,
  Crew,
  Equipment,
  Mix,
  MixOrder,
  Offer,
  Person,
  Plant,
  Pour,
  Shift,
  Site,
  Slab,
  Visit,
} from '@strikeboard/domain/snapshot';
import { finishes } from '@strikeboard/domain/vocabulary';
import type {
  crews,
  equipment,
  equipmentBookings,
  members,
  mixes,
  mixOrders,
  offers,
  plants,
  pours,
  shifts,
  sites,
  slabs,
  visits,
} from '../tables/index.ts';

const numberOrNull = (value: string | null): number | null => (value === null ? null : Number(value));

export function toCrew(row: typeof crews.$inferSelect): Crew {
  return { id: row.id, name: row.name, foremanId: row.foremanId, sortOrder: row.sortOrder };
}

export function toPerson(row: typeof members.$inferSelect): Person {
  return {
    id: row.personId,
    name: row.name,
    role: row.role,
    language: row.language,
    skills: finishes.filter((finish) => row.skills.includes(finish)),
    hasPhone: row.phoneE164 !== null,
    hasEmail: row.email !== null,
  };
}

export function toSite(row: typeof sites.$inferSelect): Site {
  return {
    id: row.id,
    name: row.name,
    address: row.address,
    zone: row.zone,
    latDeg: row.latDeg,
    lonDeg: row.lonDeg,
    permittedFromMin: row.permittedFromMin,
    permittedUntilMin: row.permittedUntilMin,
    customerName: row.customerName,
    accessNotes: row.accessNotes,
  };
}

export function toSlab(row: typeof slabs.$inferSelect): Slab {
  return {
    id: row.id,
    siteId: row.siteId,
    name: row.name,
    areaFt2: Number(row.areaFt2),
    thicknessIn: Number(row.thicknessIn),
    vapourRetarder: row.vapourRetarder,
  };
}

/** A pour with what its slabs add up to; the thickest counts. */
export function toPour(row: typeof pours.$inferSelect, itsSlabs: readonly Slab[]): Pour {
  const thickest = itsSlabs.reduce((most, slab) => Math.max(most, slab.thicknessIn), 0);
  return {
    id: row.id,
    version: row.version,
    siteId: row.siteId,
    name: row.name,
    jobRef: row.jobRef,
    slabIds: itsSlabs.map((slab) => slab.id),
    areaFt2: itsSlabs.reduce((sum, slab) => sum + slab.areaFt2, 0),
    thicknessIn: thickest > 0 ? thickest : null,
    vapourRetarder: itsSlabs.some((slab) => slab.vapourRetarder),
    orderedYd3: Number(row.orderedYd3),
    mixId: row.mixId,
    finish: row.finish,
    placingMethod: row.placingMethod,
    jointing: row.jointing,
    placingRateYd3PerHour: numberOrNull(row.placingRateYd3PerHour),
    loadYd3: numberOrNull(row.loadYd3),
    setUpMin: row.setUpMin,
    concreteTempF: numberOrNull(row.concreteTempF),
    peopleToPlace: row.peopleToPlace,
    peopleToFinish: row.peopleToFinish,
    pumpId: row.pumpId,
    willCall: row.willCall,
    readiness: row.readiness,
    notes: row.notes,
  };
}

/** A visit; `untold` while a change of it has not been told yet. */
export function toVisit(row: typeof visits.$inferSelect, untold: boolean): Visit {
  return {
    id: row.id,
    version: row.version,
    kind: row.kind,
    state: row.state,
    siteId: row.siteId,
    crewId: row.crewId,
    pourId: row.pourId,
    partYd3: numberOrNull(row.partYd3),
    title: row.title,
    during: row.during,
    wantedOn: row.wantedOn,
    plannedMin: row.plannedMin,
    window: row.window,
    causedByVisitId: row.causedByVisitId,
    acceptedCodes: row.acceptedCodes,
    untold,
  };
}

/** A shift; `told` when the person was last told of it as it stands. */
export function toShift(row: typeof shifts.$inferSelect, told: boolean): Shift {
  return {
    id: row.id,
    visitId: row.visitId,
    personId: row.personId,
    during: row.during,
    held: row.held,
    state: row.state,
    answer: row.answer,
    told,
  };
}

export function toOffer(row: typeof offers.$inferSelect): Offer {
  return { id: row.id, visitId: row.visitId, personId: row.personId, during: row.during, state: row.state };
}

export function toPlant(row: typeof plants.$inferSelect): Plant {
  return {
    id: row.id,
    name: row.name,
    zone: row.zone,
    latDeg: row.latDeg,
    lonDeg: row.lonDeg,
    maxYd3PerHour: numberOrNull(row.maxYd3PerHour),
    shortLoadYd3: numberOrNull(row.shortLoadYd3),
    hours: row.hours,
    closedDays: row.closedDays,
  };
}

export function toMix(row: typeof mixes.$inferSelect): Mix {
  return {
    id: row.id,
    plantId: row.plantId,
    code: row.code,
    name: row.name,
    strengthPsi: row.strengthPsi,
    slumpIn: numberOrNull(row.slumpIn),
    cement: row.cement,
    dischargeLimitMin: row.dischargeLimitMin,
  };
}

export function toMixOrder(row: typeof mixOrders.$inferSelect): MixOrder {
  return {
    id: row.id,
    visitId: row.visitId,
    plantId: row.plantId,
    mixId: row.mixId,
    orderedYd3: Number(row.orderedYd3),
    loadYd3: Number(row.loadYd3),
    spacingMin: Number(row.spacingMin),
    during: row.during,
    state: row.state,
  };
}

export function toEquipment(row: typeof equipment.$inferSelect): Equipment {
  return {
    id: row.id,
    kind: row.kind,
    name: row.name,
    boom: row.boom,
    reachFt: numberOrNull(row.reachFt),
    outputYd3PerHour: numberOrNull(row.outputYd3PerHour),
    setUpMin: row.setUpMin,
    washOutMin: row.washOutMin,
    travelMin: row.travelMin,
  };
}

export function toBooking(row: typeof equipmentBookings.$inferSelect): Booking {
  return {
    id: row.id,
    visitId: row.visitId,
    equipmentId: row.equipmentId,
    during: row.during,
    held: row.held,
    state: row.state,
  };
}
