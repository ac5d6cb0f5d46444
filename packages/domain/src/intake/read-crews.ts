import { parseEmail } from './contacts.ts';
import { type Reading, rowProblem } from './reading.ts';
import type { CrewRecord } from './records.ts';
import type { Row } from './rows.ts';
import { fold, nameList, spokenName } from './text.ts';

/**
 * Crews, either one row each with its members in one or several cells, or one row per member: rows of one crew
 * are joined, and a row that adds nothing is a duplicate.
 */
export function readCrews(reading: Reading): CrewRecord[] {
  const crews = new Map<string, CrewRecord>();
  for (const row of reading.rows) {
    const crew = readCrew(row);
    if (crew === null) continue;
    const before = crews.get(crew.naturalKey);
    crews.set(crew.naturalKey, before === undefined ? crew : join(before, crew, reading));
  }
  return [...crews.values()];
}

function readCrew(row: Row): CrewRecord | null {
  const name = row.text('name');
  if (name === null) row.error({ code: 'required', field: 'name' }, 'name');
  const foreman = row.text('foremanName');
  const foremanEmail = row.read('foremanEmail', parseEmail);
  // With a column per member, "Lind, Bo" is one person; in a single cell it would be two.
  const split = row.columnCount('memberNames') > 1 ? spokenName : nameList;
  const memberNames = distinct(row.texts('memberNames').flatMap(split));
  if (row.failed() || name === null) return null;
  const foremanName = foreman === null ? null : spokenName(foreman);
  return { naturalKey: fold(name), line: row.line, name, foremanName, foremanEmail, memberNames };
}

function join(before: CrewRecord, crew: CrewRecord, reading: Reading): CrewRecord {
  const joined: CrewRecord = {
    ...before,
    foremanName: before.foremanName ?? crew.foremanName,
    foremanEmail: before.foremanEmail ?? crew.foremanEmail,
    memberNames: distinct([...before.memberNames, ...crew.memberNames]),
  };
  const fields: string[] = [];
  if (crew.foremanName !== null && fold(crew.foremanName) !== fold(joined.foremanName ?? ''))
    fields.push('foremanName');
  if (crew.foremanEmail !== null && crew.foremanEmail !== joined.foremanEmail) fields.push('foremanEmail');
  if (fields.length > 0) {
    const expected = { code: 'duplicate-differs', line: before.line, fields } as const;
    reading.findings.problems.push(rowProblem(crew.line, expected, 'warning'));
  }
  if (JSON.stringify(joined) === JSON.stringify(before)) {
    reading.findings.skipped.push({ line: crew.line, reason: 'duplicate' });
  }
  return joined;
}

function distinct(names: readonly string[]): string[] {
  return [...new Map(names.map((name) => [fold(name), name] as const).reverse()).values()].reverse();
}
