/**
 * One document of plain rows for a range of days. `check` takes it in the browser and on the server alike, so
 * it is JSON: instants are epoch milliseconds, days are `YYYY-MM-DD` in the site's zone, yards are numbers.
 */

import type { CompanyRules } from './company-rules.ts';
import type { Interval } from './interval.ts';
import type {
  Answer,
  Cement,
  EquipmentKind,
  Finish,
  Jointing,
  Language,
  OfferState,
  OrderState,
  PlacingMethod,
  Role,
  ShiftState,
  VisitKind,
  VisitState,
} from './vocabulary.ts';

export interface Crew {
  id: string;
  name: string;
  foremanId: string | null;
  sortOrder: number;
}

/** A member of the company, as the board needs them. */
export interface Person {
  id: string;
  name: string;
  role: Role;
  language: Language;
  /** Finishes the person can do; empty means any. */
  skills: Finish[];
  hasPhone: boolean;
  hasEmail: boolean;
}

/** A person belongs to a crew during a range; open ends are the range of the snapshot. */
export interface CrewMembership {
  crewId: string;
  personId: string;
  during: Interval;
}

export interface Site {
  id: string;
  name: string;
  address: string;
  /** IANA time zone. */
  zone: string;
  latDeg: number | null;
  lonDeg: number | null;
  /** Minutes of the site's day in which concrete may be placed, half-open; null: no limit. */
  permittedFromMin: number | null;
  permittedUntilMin: number | null;
  customerName: string | null;
  accessNotes: string | null;
}

export interface Slab {
  id: string;
  siteId: string;
  name: string;
  areaFt2: number;
  thicknessIn: number;
  vapourRetarder: boolean;
}

/** What is to be placed. The times are on its visits. */
export interface Pour {
  id: string;
  /** Grows by one at each edit; edits name the version they were based on. */
  version: number;
  siteId: string;
  name: string;
  jobRef: string | null;
  slabIds: string[];
  /** Sum over its slabs. */
  areaFt2: number;
  thicknessIn: number | null;
  vapourRetarder: boolean;
  orderedYd3: number;
  mixId: string | null;
  finish: Finish;
  placingMethod: PlacingMethod;
  jointing: Jointing;
  /** null: the company's rule. */
  placingRateYd3PerHour: number | null;
  loadYd3: number | null;
  setUpMin: number | null;
  concreteTempF: number | null;
  /** null: reckoned. */
  peopleToPlace: number | null;
  peopleToFinish: number | null;
  /** The pump asked for; null: any that suits. */
  pumpId: string | null;
  willCall: boolean;
  readiness: { item: string; done: boolean }[];
  notes: string | null;
}

/** A block of a crew's time at a site. `during` is crew's start until wash-up's end; null while waiting. */
export interface Visit {
  id: string;
  /** Grows by one at each change; writes name the version they were based on. */
  version: number;
  kind: VisitKind;
  state: VisitState;
  siteId: string;
  crewId: string | null;
  pourId: string | null;
  /** This visit's part of the pour's yards; null for other kinds. */
  partYd3: number | null;
  title: string;
  during: Interval | null;
  /** Day the customer wants it, in the site's zone. */
  wantedOn: string | null;
  /** Length of a visit that has no chain, minutes. */
  plannedMin: number;
  /** A follow-up's earliest and latest time; null for others. */
  window: Interval | null;
  causedByVisitId: string | null;
  /** Codes of the cautions that were accepted with a reason for where it stands now. */
  acceptedCodes: string[];
  /** True when the plan differs from what people were last told. */
  untold: boolean;
}

/** One person's time on one visit. `held` contains the travel to it. */
export interface Shift {
  id: string;
  visitId: string;
  personId: string;
  during: Interval;
  held: Interval;
  state: ShiftState;
  answer: Answer;
  /** Has been told of it as it stands. */
  told: boolean;
}

/** A shift put to a sub. It holds no time. */
export interface Offer {
  id: string;
  visitId: string;
  personId: string;
  during: Interval;
  state: OfferState;
}

/** A person's time taken elsewhere: in another company, or marked by themselves. Nothing more is known of it. */
export interface BusyTime {
  personId: string;
  during: Interval;
}

export interface Plant {
  id: string;
  name: string;
  zone: string;
  latDeg: number | null;
  lonDeg: number | null;
  maxYd3PerHour: number | null;
  /** Smallest load without a short-load charge, yd³. */
  shortLoadYd3: number | null;
  /** By ISO weekday 1 (Monday) to 7: first and last load, minutes of the plant's day; null: closed. */
  hours: ({ fromMin: number; untilMin: number } | null)[];
  /** Days on which the plant is closed, `YYYY-MM-DD`. */
  closedDays: string[];
}

export interface Mix {
  id: string;
  plantId: string;
  code: string;
  name: string;
  strengthPsi: number;
  slumpIn: number | null;
  cement: Cement;
  dischargeLimitMin: number | null;
}

export interface MixOrder {
  id: string;
  visitId: string;
  plantId: string;
  mixId: string;
  orderedYd3: number;
  loadYd3: number;
  spacingMin: number;
  /** First truck on site until last truck discharged. */
  during: Interval;
  state: OrderState;
}

export interface Equipment {
  id: string;
  kind: EquipmentKind;
  name: string;
  /** For pumps: whether it is a boom. */
  boom: boolean;
  reachFt: number | null;
  outputYd3PerHour: number | null;
  setUpMin: number;
  washOutMin: number;
  travelMin: number;
}

/** A piece of equipment's time on a visit. `held` contains travel, set-up and wash-out. */
export interface Booking {
  id: string;
  visitId: string;
  equipmentId: string;
  during: Interval;
  held: Interval;
  state: OrderState;
}

/** One hour of forecast at a site. */
export interface WeatherHour {
  siteId: string;
  startMs: number;
  airTempF: number;
  humidityPercent: number;
  windMph: number;
  /** null: unknown, which is not 0. */
  rainChancePercent: number | null;
}

export interface Snapshot {
  companyId: string;
  /** The company's revision at which it was read. */
  revision: number;
  /** IANA zone of the company's office. */
  zone: string;
  range: Interval;
  rules: CompanyRules;
  crews: Crew[];
  people: Person[];
  memberships: CrewMembership[];
  sites: Site[];
  slabs: Slab[];
  pours: Pour[];
  visits: Visit[];
  shifts: Shift[];
  offers: Offer[];
  busy: BusyTime[];
  plants: Plant[];
  mixes: Mix[];
  mixOrders: MixOrder[];
  equipment: Equipment[];
  bookings: Booking[];
  weather: WeatherHour[];
}

/** Asking for a visit to stand on a crew's lane from an instant. */
export interface Placement {
  visitId: string;
  crewId: string;
  /** When the crew is to be there, epoch ms. */
  crewStartMs: number;
  /** The pump to book; left out: the pour's own, else the first free one that suits. */
  pumpId?: string | null;
}
