import { type APIRequestContext, type APIResponse, expect } from '@playwright/test';
import { indexSnapshot } from '@strikeboard/domain/board-index';
import type { Finding, FindingCode } from '@strikeboard/domain/finding';
import { planPlacement } from '@strikeboard/domain/plan-placement';
import type { Snapshot } from '@strikeboard/domain/snapshot';
import { addDays, instantAt, type SiteDay, siteDayOf, weekdayOf } from '@strikeboard/domain/zone';

/** A problem document (RFC 9457, section 3), with this application's own members. */
export interface Problem {
  type: string;
  title: string;
  status: number;
  detail: string;
  code: string;
  errors?: { field: string; value: unknown; expected: string }[];
  findings?: Finding[];
  changed?: string[];
}

interface Company {
  slug: string;
  zone: string;
}

let keys = 0;
/** An Idempotency-Key that was not used before. */
export function freshKey(): string {
  keys += 1;
  return `e2e-${Date.now().toString(36)}-${keys}`;
}

/** Today at a company's office. */
export function todayAt({ zone }: Company): SiteDay {
  return siteDayOf(Date.now(), zone);
}

/** Arranges a company's board for a test, as a dispatcher's own program could. */
export class BoardApi {
  readonly request: APIRequestContext;
  readonly company: Company;

  constructor(request: APIRequestContext, company: Company) {
    this.request = request;
    this.company = company;
  }

  async read(from: SiteDay, days = 7): Promise<Snapshot> {
    return json(await this.request.get(`/api/${this.company.slug}/board?from=${from}&days=${days}`));
  }

  async revision(): Promise<number> {
    return (await this.read(todayAt(this.company), 1)).revision;
  }

  post(path: string, data?: unknown): Promise<APIResponse> {
    return this.request.post(`/api/${this.company.slug}/${path}`, {
      headers: { 'Idempotency-Key': freshKey() },
      ...(data === undefined ? {} : { data }),
    });
  }

  patch(path: string, data: unknown): Promise<APIResponse> {
    const headers = { 'Idempotency-Key': freshKey() };
    return this.request.patch(`/api/${this.company.slug}/${path}`, { headers, data });
  }

  /** A waiting pour: a broomed walk, 40 ft by 10 ft and 4 inches, at the named site. */
  async addPour(name: string, of: { site: string; wantedOn: SiteDay }) {
    const board = await this.read(of.wantedOn, 1);
    const mix = board.mixes.find(({ code }) => /4[05]00-AIR$/.test(code));
    const { patch } = await json<{ patch: Pick<Snapshot, 'visits' | 'pours'> }>(
      await this.post('pours', {
        siteId: one(board.sites, of.site).id,
        name,
        orderedYd3: 5.25,
        areaFt2: 400,
        thicknessIn: 4,
        finish: 'broom',
        placingMethod: 'chute',
        jointing: 'tooled',
        mixId: mix?.id ?? null,
        wantedOn: of.wantedOn,
      }),
    );
    const [visit] = patch.visits;
    const [pour] = patch.pours;
    if (!visit || !pour) throw new Error('The new pour has no visit.');
    return { visit, pour };
  }

  /** A waiting visit that is no pour: two hours of prep at the named site. */
  async addPrep(title: string, of: { site: string; wantedOn: SiteDay }) {
    const board = await this.read(of.wantedOn, 1);
    const { patch } = await json<{ patch: Pick<Snapshot, 'visits'> }>(
      await this.post('visits', {
        kind: 'prep',
        siteId: one(board.sites, of.site).id,
        title,
        plannedMin: 120,
        wantedOn: of.wantedOn,
      }),
    );
    const [visit] = patch.visits;
    if (!visit) throw new Error('There is no new visit.');
    return visit;
  }

  /** Puts a visit on a crew's lane, with a reason for each caution. */
  async place(visitId: string, of: { crewId: string; crewStartMs: number; baseVersion: number }) {
    const first = await this.post(`visits/${visitId}/place`, of);
    if (first.status() !== 422) return json<{ revision: number; patch: Snapshot }>(first);
    const problem: Problem = await first.json();
    expect(problem.code, problem.findings?.map(({ code }) => code).join(', ')).toBe('reason-needed');
    const reasons = Object.fromEntries(
      (problem.findings ?? []).map(({ code }) => [code, 'Agreed by phone.']),
    );
    return json<{ revision: number; patch: Snapshot }>(
      await this.post(`visits/${visitId}/place`, { ...of, reasons }),
    );
  }

  /**
   * A crew that has nothing on a weekday, of the days from `from` on. Weekdays only, since plants may be closed on
   * others.
   */
  async freeCrew(of: { from: SiteDay; days: number; fits?: (spot: FreeSpot) => boolean }): Promise<FreeSpot> {
    const snapshot = await this.read(addDays(of.from, -1), of.days + 2);
    const { zone } = this.company;
    for (let ahead = 0; ahead < of.days; ahead += 1) {
      const day = addDays(of.from, ahead);
      if (weekdayOf(day) > 5) continue;
      // The evening before and the small hours after it too, so that no rest between shifts is too short.
      const around = {
        startMs: instantAt(addDays(day, -1), 20 * 60, zone),
        endMs: instantAt(addDays(day, 1), 3 * 60, zone),
      };
      for (const crew of snapshot.crews) {
        const taken = snapshot.visits.some(
          ({ crewId, during, state }) =>
            crewId === crew.id &&
            state !== 'called-off' &&
            during !== null &&
            during.startMs < around.endMs &&
            around.startMs < during.endMs,
        );
        const members = snapshot.memberships.filter(
          ({ crewId, during }) =>
            crewId === crew.id && during.startMs <= around.startMs && around.endMs <= during.endMs,
        );
        const spot = { day, crewId: crew.id, crewName: crew.name, snapshot };
        if (!taken && members.length >= 3 && (of.fits?.(spot) ?? true)) return spot;
      }
    }
    throw new Error(`No crew is free on a weekday in the ${of.days} days from ${of.from}.`);
  }
}

export interface FreeSpot {
  day: SiteDay;
  crewId: string;
  crewName: string;
  snapshot: Snapshot;
}

/** Codes of what a placement would be told, by severity: to choose a time for a test, not to judge one. */
export function codesAt(
  snapshot: Snapshot,
  placement: { visitId: string; crewId: string; crewStartMs: number },
): { stop: FindingCode[]; caution: FindingCode[] } {
  const { findings } = planPlacement(indexSnapshot(snapshot), placement, Date.now());
  const of = (wanted: Finding['severity']) =>
    findings.filter(({ severity }) => severity === wanted).map(({ code }) => code);
  return { stop: of('stop'), caution: of('caution') };
}

/** The one row of a name. */
export function one<T extends { name: string }>(rows: readonly T[], name: string): T {
  const found = rows.find((row) => row.name === name);
  if (!found)
    throw new Error(`There is none called ${name}, only ${rows.map((row) => row.name).join(', ')}.`);
  return found;
}

/** The body of an answer that must be a success. */
export async function json<T>(answer: APIResponse): Promise<T> {
  if (!answer.ok()) throw new Error(`${answer.status()} from ${answer.url()}: ${await answer.text()}`);
  return answer.json();
}
