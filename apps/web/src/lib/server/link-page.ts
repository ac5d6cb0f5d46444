import { type Database, inCompany, type Tx } from '@strikeboard/db/client';
import { answerVisit } from '@strikeboard/db/queries/answers';
import { type OpenedLink, openLink } from '@strikeboard/db/queries/links';
import { visitDetail } from '@strikeboard/db/queries/pours';
import { listMembers } from '@strikeboard/db/queries/set-up';
import { indexAround } from '@strikeboard/db/queries/visit-changes';
import { readVisitFacts } from '@strikeboard/db/queries/visit-facts';
import { type BoardIndex, isPlaced } from '@strikeboard/domain/board-index';
import { findingsOf } from '@strikeboard/domain/checks/run';
import type { FindingCode } from '@strikeboard/domain/finding';
import { standingPlan } from '@strikeboard/domain/plan';
import type { Language } from '@strikeboard/domain/vocabulary';
import type { LinkPage } from '../api/schemas/links.ts';
import { whatToBring } from '../words/bring.ts';
import { wordsOfFinding as english } from '../words/findings.en.ts';
import { wordsOfFinding as spanish } from '../words/findings.es.ts';

/** What a crew must watch out for; what is the office's to settle stays in the office. */
const forCrews: ReadonlySet<FindingCode> = new Set<FindingCode>([
  'site-hours',
  'after-dark',
  'freezing',
  'hot-mix',
  'evaporation-high',
  'rain-likely',
  'wind-boom',
  'lightning',
  'heat-stress',
  'cure-blackout',
  'adjacent-green',
  'set-outruns-crew',
]);

/** Tokens are 32 bytes as base64url; anything else is not worth a look-up. */
const tokenShape = /^[A-Za-z0-9_-]{43}$/;

/** What a link shows to its holder; null: it opens nothing (any more). */
export async function readLinkPage(db: Database, token: string, nowMs: number): Promise<LinkPage | null> {
  const link = tokenShape.test(token) ? await openLink(db, token, nowMs) : null;
  if (!link) return null;
  return inCompany(db, { companyId: link.companyId, personId: null }, (tx) => readPage(tx, link, nowMs));
}

/** Records an answer through a link; null: the link opens nothing. @throws Conflict `changed-since` */
export async function answerThroughLink(
  db: Database,
  given: { token: string; answer: 'yes' | 'no'; seenStartMs: number | null; nowMs: number },
): Promise<'recorded' | 'not-free' | 'not-asked' | null> {
  const { token, answer, seenStartMs, nowMs } = given;
  const link = tokenShape.test(token) ? await openLink(db, token, nowMs) : null;
  if (!link) return null;
  const { companyId, personId, visitId } = link;
  const result = await inCompany(db, { companyId, personId }, (tx) =>
    answerVisit(tx, { visitId, personId, answer, nowMs, seenStartMs }),
  );
  return result.outcome;
}

async function readPage(tx: Tx, link: OpenedLink, nowMs: number): Promise<LinkPage | null> {
  const { visit, facts, companyName } = await readVisitFacts(tx, link.visitId);
  const detail = await visitDetail(tx, link.visitId);
  const member = (await listMembers(tx, { ended: true })).find(({ personId }) => personId === link.personId);
  if (!member) return null;
  const language = member.language;
  const mine = detail.people.find(({ personId }) => personId === link.personId);
  const base = { companyName, language, personName: member.name, kind: visit.kind, title: visit.title };
  if (!facts)
    return { ...base, ...nothing, state: visit.state === 'called-off' ? 'called-off' : 'not-on-it' };
  const index = await indexAround(tx, facts.crewStartMs, [link.visitId]);
  const crew = visit.crewId === null ? undefined : index.crews.get(visit.crewId);
  const pour = visit.pourId === null ? undefined : index.pours.get(visit.pourId);
  const isOver = visit.during !== null && visit.during.endMs <= nowMs;
  const isOn = mine !== undefined && mine.state !== 'lapsed' && visit.state === 'firm';
  return {
    ...base,
    day: facts.day,
    crewStartMs: facts.crewStartMs,
    firstTruckMs: facts.firstLoadMs,
    zone: facts.zone,
    siteName: facts.siteName,
    address: facts.address,
    accessNotes: index.sites.get(visit.siteId)?.accessNotes ?? null,
    yards: facts.partYd3,
    finish: facts.finish,
    crewName: crew?.name ?? null,
    people: detail.people
      .filter(({ state }) => state === 'held')
      .map(({ name, personId }) => ({ name, foreman: personId === crew?.foremanId })),
    bring: whatToBring(language, {
      kind: visit.kind,
      finish: pour?.finish ?? null,
      method: pour?.placingMethod ?? null,
    }),
    cautions: cautionsOf(index, link.visitId, language, nowMs),
    answer: mine?.answer ?? 'none',
    relation: mine && mine.state !== 'held' && mine.state !== 'released' ? 'offer' : 'shift',
    state: isOver ? 'over' : isOn ? 'open' : 'not-on-it',
  };
}

/** Of a visit that is off the board nothing more is told. */
const nothing = {
  day: '',
  crewStartMs: 0,
  firstTruckMs: null,
  zone: 'UTC',
  siteName: '',
  address: '',
  accessNotes: null,
  yards: null,
  finish: null,
  crewName: null,
  people: [],
  bring: [],
  cautions: [],
  answer: 'none' as const,
  relation: 'shift' as const,
};

function cautionsOf(index: BoardIndex, visitId: string, language: Language, nowMs: number): string[] {
  const visit = index.visits.get(visitId);
  if (!visit || !isPlaced(visit)) return [];
  const zone = index.sites.get(visit.siteId)?.zone ?? 'UTC';
  const names = (kind: string, id: string) => nameIn(index, kind, id);
  const words = language === 'es' ? spanish : english;
  return findingsOf(standingPlan(index, visit, nowMs))
    .filter(({ code, severity }) => forCrews.has(code) && severity !== 'stop')
    .map((finding) => {
      const { what, why } = words(finding, names, zone);
      return `${what}. ${why}`;
    });
}

function nameIn(index: BoardIndex, kind: string, id: string): string {
  if (kind === 'visit') return index.visits.get(id)?.title ?? '';
  if (kind === 'site') return index.sites.get(id)?.name ?? '';
  if (kind === 'plant') return index.plants.get(id)?.name ?? '';
  if (kind === 'equipment') return index.equipment.get(id)?.name ?? '';
  if (kind === 'crew') return index.crews.get(id)?.name ?? '';
  return '';
}
