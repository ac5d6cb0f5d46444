import { parseEmail, parseLanguage, parsePhone } from './contacts.ts';
import { type Reading, rowProblem, withoutDuplicates } from './reading.ts';
import type { PersonRecord } from './records.ts';
import type { Row } from './rows.ts';
import { fold, spokenName } from './text.ts';
import { parseRole, parseSkills } from './trade-words.ts';

/**
 * People. The key is the e-mail, else the phone, else the name. One e-mail under two names is an error, for it
 * would be one sign-in; one phone under two names (a shared one) is a warning.
 */
export function readPeople(reading: Reading): PersonRecord[] {
  const read = reading.rows.flatMap((row) => readPerson(row, reading) ?? []);
  const byEmail = new Map<string, PersonRecord>();
  const people = read.filter((person) => {
    if (person.email === null) return true;
    const first = byEmail.get(person.email) ?? person;
    byEmail.set(person.email, first);
    if (fold(first.name) === fold(person.name)) return true;
    reading.findings.problems.push(
      rowProblem(person.line, { code: 'email-shared', line: first.line }, 'error'),
    );
    return false;
  });
  const unique = withoutDuplicates(people, reading.findings);
  const byPhone = new Map<string, PersonRecord>();
  return unique.filter((person) => {
    if (person.phoneE164 === null) return true;
    const first = byPhone.get(person.phoneE164);
    if (first === undefined) {
      byPhone.set(person.phoneE164, person);
      return true;
    }
    if (fold(first.name) === fold(person.name) && (first.email === null || person.email === null)) {
      reading.findings.skipped.push({ line: person.line, reason: 'duplicate' });
      return false;
    }
    reading.findings.problems.push(
      rowProblem(person.line, { code: 'phone-shared', line: first.line }, 'warning'),
    );
    return true;
  });
}

function readPerson(row: Row, reading: Reading): PersonRecord | null {
  const parts = [row.text('firstName'), row.text('lastName')].filter((part) => part !== null);
  const written = row.text('name') ?? '';
  const name =
    written === '' || (parts.length === 2 && row.has('lastName')) ? parts.join(' ') || written : written;
  if (name === '') row.error({ code: 'required', field: 'name' }, 'name');
  const phoneE164 = row.read('phone', (text) => parsePhone(text, reading.options.country));
  const email = row.read('email', parseEmail);
  const role = row.read('role', parseRole) ?? reading.assume(row, 'role', 'finisher');
  const language = row.read('language', parseLanguage);
  const skills = row.read('skills', parseSkills) ?? [];
  const crewName = row.text('crewName');
  if (row.failed()) return null;
  if (phoneE164 === null && email === null) row.warn({ code: 'cannot-be-told' });
  const spoken = spokenName(name);
  const naturalKey =
    email !== null ? `email:${email}` : phoneE164 !== null ? `phone:${phoneE164}` : `name:${fold(spoken)}`;
  return { naturalKey, line: row.line, name: spoken, phoneE164, email, role, crewName, language, skills };
}
