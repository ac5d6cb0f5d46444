import type { CrewRecord } from '@strikeboard/domain/intake/records';
import { fold } from '@strikeboard/domain/intake/text';
import type { Tx } from '../client.ts';
import {
  joinCrews,
  type MemberRow,
  makeCrews,
  type Roster,
  readRoster,
  setForeman,
} from './import-people.ts';
import {
  grouped,
  type ImportContext,
  type ImportCounts,
  type ImportForecast,
  onlyOne,
  type ReferenceCode,
  type ReferenceProblem,
} from './import-plan.ts';

/** What becomes of one record. */
interface CrewStep {
  record: CrewRecord;
  /** Null: to be made. */
  crewId: string | null;
  /** Fills the blank of the foreman. */
  foremanId: string | null;
  /** People of no crew who are put on this one. */
  joining: string[];
}

/** What accepting these crews would do. */
export async function forecastCrews(
  tx: Tx,
  records: readonly CrewRecord[],
  context: ImportContext,
): Promise<ImportForecast> {
  const { steps, problems } = planCrews(records, await readRoster(tx, context.nowMs));
  return { ...countsOf(steps), problems };
}

/** Makes crews, names their foremen and puts people on them. Records that refer to nobody must be out already. */
export async function acceptCrews(
  tx: Tx,
  records: readonly CrewRecord[],
  context: ImportContext,
): Promise<ImportCounts> {
  const roster = await readRoster(tx, context.nowMs);
  const { steps } = planCrews(records, roster);
  const toMake = steps.filter((step) => step.crewId === null);
  const made = await makeCrews(
    tx,
    new Map(toMake.map(({ record }) => [record.naturalKey, record.name] as const)),
  );
  const crewIdOf = (step: CrewStep): string => step.crewId ?? made.get(step.record.naturalKey) ?? '';
  await joinCrews(
    tx,
    steps.flatMap((step) => step.joining.map((personId) => ({ personId, crewId: crewIdOf(step) }))),
    { roster, context },
  );
  for (const step of steps) {
    if (step.foremanId !== null) await setForeman(tx, { crewId: crewIdOf(step), personId: step.foremanId });
  }
  return countsOf(steps);
}

function countsOf(steps: readonly CrewStep[]): ImportCounts {
  const created = steps.filter((step) => step.crewId === null).length;
  const updated = steps.filter(
    (step) => step.crewId !== null && (step.foremanId !== null || step.joining.length > 0),
  ).length;
  return { created, updated, unchanged: steps.length - created - updated };
}

function planCrews(
  records: readonly CrewRecord[],
  roster: Roster,
): { steps: CrewStep[]; problems: ReferenceProblem[] } {
  const problems: ReferenceProblem[] = [];
  const crewOf = new Map(roster.crewOf);
  const current = roster.members.filter((member) => member.endedAt === null);
  const people = {
    byName: grouped(current, (row) => fold(row.name)),
    byEmail: grouped(current, (row) => row.email?.toLowerCase() ?? null),
  };
  const steps: CrewStep[] = [];
  for (const record of records) {
    const found = problems.length;
    const problem = (field: string, value: string, code: ReferenceCode, severity: 'error' | 'warning') =>
      problems.push({ line: record.line, field, value, code, severity });
    const crew = roster.crewsByKey.get(record.naturalKey);
    if (crew?.endedAt) {
      problem('name', record.name, 'crew-ended', 'warning');
      steps.push({ record, crewId: crew.id, foremanId: null, joining: [] });
      continue;
    }
    const foreman = findForeman(record, people, problem);
    const named = record.memberNames.flatMap((name) => find(name, 'memberNames', people, problem) ?? []);
    if (problems.slice(found).some((one) => one.severity === 'error')) continue;
    const crewKey = crew?.id ?? record.naturalKey;
    const joining: string[] = [];
    for (const person of foreman === null ? named : [foreman, ...named]) {
      const on = crewOf.get(person.personId);
      if (on === undefined) {
        crewOf.set(person.personId, crewKey);
        joining.push(person.personId);
      } else if (on !== crewKey) {
        problem(
          person === foreman ? 'foremanName' : 'memberNames',
          person.name,
          'person-elsewhere',
          'warning',
        );
      }
    }
    const leads = (crew?.foremanId ?? null) === null ? (foreman?.personId ?? null) : null;
    steps.push({ record, crewId: crew?.id ?? null, foremanId: leads, joining });
  }
  return { steps, problems };
}

interface People {
  byName: ReadonlyMap<string, MemberRow[]>;
  byEmail: ReadonlyMap<string, MemberRow[]>;
}
type Report = (field: string, value: string, code: ReferenceCode, severity: 'error' | 'warning') => void;

function findForeman(record: CrewRecord, people: People, problem: Report): MemberRow | null {
  const byEmail =
    record.foremanEmail === null ? undefined : people.byEmail.get(record.foremanEmail.toLowerCase())?.[0];
  if (byEmail) return byEmail;
  if (record.foremanName !== null) return find(record.foremanName, 'foremanName', people, problem);
  if (record.foremanEmail !== null) problem('foremanEmail', record.foremanEmail, 'person-unknown', 'error');
  return null;
}

function find(name: string, field: string, people: People, problem: Report): MemberRow | null {
  const named = people.byName.get(fold(name)) ?? [];
  if (named.length !== 1) {
    problem(field, name, named.length === 0 ? 'person-unknown' : 'person-ambiguous', 'error');
  }
  return onlyOne(named);
}
