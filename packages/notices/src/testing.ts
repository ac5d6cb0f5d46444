import type { ToldFacts } from '@strikeboard/domain/told';
import { instantAt } from '@strikeboard/domain/zone';
import type { PersonSituation, Situation } from './ports.ts';

export const SITE_ZONE = 'America/Denver';
export const COMPANY_ID = '01936f2a-0000-7000-8000-000000000001';
export const VISIT_ID = '01936f2a-0000-7000-8000-000000000002';
export const PERSON_ID = '01936f2a-0000-7000-8000-000000000003';
export const NOTICE_ID = '01936f2a-0000-7000-8000-000000000004';

/** An instant by the clock of the tests' site, such as `at('2026-12-08', '6:30')`. */
export function at(day: string, clock: string, zone = SITE_ZONE): number {
  const [hour = 0, minute = 0] = clock.split(':').map(Number);
  return instantAt(day, hour * 60 + minute, zone);
}

/** A pour in Colorado on Tuesday 2026-12-08: crew at 6:30, first truck at 7:15, 32 yards with a broom finish. */
export function facts(change: Partial<ToldFacts> = {}): ToldFacts {
  return {
    visitId: VISIT_ID,
    companyName: 'Cedar Flat Concrete',
    day: '2026-12-08',
    crewStartMs: at('2026-12-08', '6:30'),
    firstLoadMs: at('2026-12-08', '7:15'),
    zone: SITE_ZONE,
    address: '412 Elm St, Longmont CO',
    siteName: 'Elm St garage',
    partYd3: 32,
    finish: 'broom',
    title: 'Garage slab',
    calledOff: false,
    ...change,
  };
}

/** Ana, who holds a shift, lives in the site's zone, and has been told nothing. */
export function person(change: Partial<PersonSituation> = {}): PersonSituation {
  return {
    personId: PERSON_ID,
    name: 'Ana Reyes',
    phoneE164: '+13035550123',
    email: null,
    silenced: false,
    language: 'en',
    zone: SITE_ZONE,
    relation: 'shift',
    told: null,
    saidNo: false,
    now: facts(),
    ...change,
  };
}

/** A firm visit on the Sunday noon before. */
export function situation(people: PersonSituation[], change: Partial<Situation> = {}): Situation {
  return {
    companyId: COMPANY_ID,
    visitId: VISIT_ID,
    visitState: 'firm',
    units: 'us',
    nowMs: at('2026-12-06', '12:00'),
    people,
    ...change,
  };
}
