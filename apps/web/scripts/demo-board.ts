/** Puts part of a demo company's pours on its board, as its dispatcher would have, and leaves the rest to the visitor. */

import { type Database, inCompany, type Tx } from '@strikeboard/db/client';
import { Refused } from '@strikeboard/db/errors';
import { readSnapshot } from '@strikeboard/db/queries/board';
import { closeVisit } from '@strikeboard/db/queries/close';
import { callOff, placeVisit } from '@strikeboard/db/queries/placement';
import { createPour, createVisit } from '@strikeboard/db/queries/pours';
import { joinCrew } from '@strikeboard/db/queries/set-up-crews';
import type { Placement, Snapshot } from '@strikeboard/domain/snapshot';
import type { Finish, PlacingMethod, VisitKind } from '@strikeboard/domain/vocabulary';
import { addDays, instantAt, mondayOf, siteDayOf } from '@strikeboard/domain/zone';

interface At {
  companyId: string;
  actorId: string;
  nowMs: number;
  zone: string;
}

const REASON = 'Walked it with the foreman; it works.';
const PAST_WEEKS = 8;
const SHARED_SUB = 'Rubén Carrasco';

/** Pours that stand on the board already, by name of the pour, with part of the crew's name and the crew's start. */
const placed: readonly { pour: string; crew: string; startMin: number }[] = [
  { pour: 'Truck scale approach', crew: 'north', startMin: 315 },
  { pour: 'Driveway', crew: 'south', startMin: 405 },
  { pour: 'Basement floor', crew: 'big', startMin: 405 },
  { pour: 'Garage slab', crew: 'south', startMin: 375 },
  { pour: 'Shop floor', crew: 'big', startMin: 285 },
  { pour: 'Ramp and landing', crew: 'north', startMin: 555 },
  { pour: 'Piso', crew: '', startMin: 375 },
  { pour: 'Entrada', crew: '', startMin: 435 },
];

/** Work that is no pour, by the day of the week (0 for Monday). */
const others: readonly {
  kind: Exclude<VisitKind, 'pour'>;
  title: string;
  site: string;
  day: number;
  startMin: number;
  plannedMin: number;
  crew: string;
}[] = [
  {
    kind: 'prep',
    title: 'Form and grade',
    site: 'Tamarisk lot 14',
    day: 0,
    startMin: 420,
    plannedMin: 420,
    crew: 'south',
  },
  {
    kind: 'prep',
    title: 'Tear out',
    site: 'Poudre Bend Feed',
    day: 2,
    startMin: 390,
    plannedMin: 540,
    crew: 'north',
  },
  {
    kind: 'protect',
    title: 'Blankets',
    site: 'Ditch Rider shop',
    day: 4,
    startMin: 420,
    plannedMin: 120,
    crew: 'saw',
  },
];

/** What was poured in the weeks before, so that the yard sheet has a past: name, yards, area, day and hour. */
const history: readonly {
  name: string;
  yd3: number;
  areaFt2: number;
  thicknessIn: number;
  finish: Finish;
  method: PlacingMethod;
  day: number;
}[] = [
  { name: 'Approach', yd3: 18.5, areaFt2: 1150, thicknessIn: 5, finish: 'broom', method: 'chute', day: 1 },
  { name: 'Walks', yd3: 9.25, areaFt2: 700, thicknessIn: 4, finish: 'broom', method: 'chute', day: 3 },
  { name: 'Shed floor', yd3: 27, areaFt2: 1650, thicknessIn: 5, finish: 'trowel', method: 'chute', day: 2 },
];

export async function fillBoard(web: Database, at: At): Promise<void> {
  const run = <T>(work: (tx: Tx) => Promise<T>) =>
    inCompany(web, { companyId: at.companyId, personId: at.actorId }, work);
  const week = mondayOf(addDays(siteDayOf(at.nowMs, at.zone), 2));
  const read = () =>
    run((tx) =>
      readSnapshot(tx, {
        range: { startMs: instantAt(week, 0, at.zone), endMs: instantAt(addDays(week, 14), 0, at.zone) },
      }),
    );

  const before = await read();
  await pourThePast({ run, read, at, week, board: before });
  // The sub who works for both companies is asked for by a crew of each.
  const shared = before.people.find(({ name }) => name === SHARED_SUB);
  const [firstCrew] = before.crews;
  if (shared && firstCrew)
    await run((tx) =>
      joinCrew(tx, {
        crewId: (crewNamed(before, 'north') ?? firstCrew).id,
        personId: shared.id,
        fromMs: at.nowMs,
      }),
    );

  const board = await read();
  for (const other of others) {
    const site = board.sites.find(({ name }) => name === other.site);
    const crew = crewNamed(board, other.crew);
    if (!site || !crew) continue;
    const day = addDays(week, other.day);
    const { patch } = await run((tx) =>
      createVisit(tx, {
        ...acting(at),
        visit: {
          kind: other.kind,
          siteId: site.id,
          title: other.title,
          plannedMin: other.plannedMin,
          wantedOn: day,
        },
      }),
    );
    const [visit] = patch.visits;
    if (visit)
      await put(
        run,
        at,
        { visitId: visit.id, crewId: crew.id, crewStartMs: instantAt(day, other.startMin, site.zone) },
        visit.version,
      );
  }
  const taken = new Set<string>();
  for (const [at_, { pour: pourName, crew: crewName, startMin }] of placed.entries()) {
    const pour = board.pours.find(({ name, id }) => name === pourName && !taken.has(id));
    const visit = board.visits.find(({ pourId, state }) => pourId === pour?.id && state === 'waiting');
    const site = board.sites.find(({ id }) => id === pour?.siteId);
    const crew =
      crewName === '' ? board.crews[at_ % Math.max(board.crews.length, 1)] : crewNamed(board, crewName);
    if (!pour || !visit?.wantedOn || !site || !crew) continue;
    taken.add(pour.id);
    await put(
      run,
      at,
      { visitId: visit.id, crewId: crew.id, crewStartMs: instantAt(visit.wantedOn, startMin, site.zone) },
      visit.version,
    );
  }
}

type Run = <T>(work: (tx: Tx) => Promise<T>) => Promise<T>;

const acting = (at: At) => ({ actorId: at.actorId, nowMs: at.nowMs, settleSeconds: 0 });

function crewNamed(board: Snapshot, part: string) {
  return board.crews.find(({ name }) => name.toLowerCase().includes(part));
}

/** Places a visit with a reason for every caution; what a stop forbids stays waiting. Returns its version. */
async function put(run: Run, at: At, placement: Placement, baseVersion: number): Promise<number | null> {
  const place = (reasons: Parameters<typeof placeVisit>[1]['reasons']) =>
    run((tx) => placeVisit(tx, { ...acting(at), placement, baseVersion, reasons }));
  try {
    const { patch } = await place({}).catch((error: unknown) => {
      if (!(error instanceof Refused) || error.code !== 'reason-needed') throw error;
      return place(Object.fromEntries(error.findings.map(({ code }) => [code, REASON])));
    });
    return patch.visits.find(({ id }) => id === placement.visitId)?.version ?? null;
  } catch (error) {
    if (error instanceof Refused) return null;
    throw error;
  }
}

async function pourThePast(of: {
  run: Run;
  read: () => Promise<Snapshot>;
  at: At;
  week: string;
  board: Snapshot;
}): Promise<void> {
  const { run, read, at, week, board } = of;
  const sites = board.sites.filter(
    ({ zone, permittedFromMin }) => zone === at.zone && permittedFromMin === null,
  );
  const [mix] = board.mixes;
  for (let weeksAgo = PAST_WEEKS; weeksAgo >= 1; weeksAgo -= 1) {
    for (const [turn, crew] of board.crews.entries()) {
      const job = history[(turn + weeksAgo) % history.length];
      const site = sites[(turn * 3 + weeksAgo) % Math.max(sites.length, 1)];
      // Not every crew pours in every week.
      if (!job || !site || (turn + weeksAgo) % 4 === 0) continue;
      const day = addDays(week, job.day - 7 * weeksAgo);
      const then = { ...acting(at), nowMs: instantAt(day, 1439, at.zone) };
      const { patch } = await run((tx) =>
        createPour(tx, {
          ...then,
          pour: {
            siteId: site.id,
            name: job.name,
            orderedYd3: job.yd3 + ((weeksAgo * 7 + turn * 5) % 9),
            areaFt2: job.areaFt2,
            thicknessIn: job.thicknessIn,
            finish: job.finish,
            placingMethod: job.method,
            jointing: 'tooled',
            mixId: mix?.id ?? null,
            wantedOn: day,
          },
        }),
      );
      const [visit] = patch.visits;
      if (!visit) continue;
      const version = await put(
        run,
        { ...at, nowMs: then.nowMs },
        { visitId: visit.id, crewId: crew.id, crewStartMs: instantAt(day, 390, site.zone) },
        visit.version,
      );
      for (const followUp of (await read()).visits.filter(
        ({ causedByVisitId }) => causedByVisitId === visit.id,
      )) {
        const { id, version: baseVersion } = followUp;
        await run((tx) => callOff(tx, { ...then, visitId: id, baseVersion, reason: 'Done with the pour' }));
      }
      await run((tx) =>
        version === null
          ? callOff(tx, { ...then, visitId: visit.id, baseVersion: visit.version, reason: 'Rained out' })
          : closeVisit(tx, { ...acting(at), visitId: visit.id, baseVersion: version }),
      );
    }
  }
}
