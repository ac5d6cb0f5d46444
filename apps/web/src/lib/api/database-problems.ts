import { Conflict, NotFound, Refused, StaleVersion } from '@strikeboard/db/errors';
import { problemOf } from './problems.ts';
import type { Problem } from './schemas/problem.ts';

/** Sentences of conflicts by their code; a code without one gets the common sentence. */
const conflictSentences: Readonly<Record<string, string>> = {
  'email-taken': 'Someone has this e-mail address already.',
  'slug-taken': 'Another company has this address.',
  'name-taken': 'There is one with this name already.',
  'site-taken': 'There is a site with this name and address already.',
  'already-member': 'This person belongs to the company already.',
  'last-owner': 'A company needs at least one owner.',
  'import-closed': 'This import was accepted or put aside before.',
  'import-kind': 'This file was brought in as another kind.',
  'unresolved-references': 'Some rows name sites or mixes that are not there.',
  'changed-since': 'It has changed since you were shown it. Look at it again first.',
  'visit-closed': 'This visit is done or called off; it stays where it is.',
  'not-pencilled': 'Only a pencilled visit can be made firm.',
  'undone-already': 'This change was undone before.',
  'time-taken': 'It cannot go back: the time there has been taken since.',
  'yards-placed': 'More yards than that are placed already.',
  'pour-taken': 'The site has a pour of that name for that day already.',
  'key-reused': 'The same Idempotency-Key came with another request.',
  'not-undoable': 'This change cannot be undone.',
};

/** The database's own refusals as problem documents; null for anything unexpected. */
export function problemOfDatabase(error: unknown): Problem | null {
  if (error instanceof NotFound) {
    return problemOf('not-found', `There is no such ${error.what.replaceAll('-', ' ')} here.`);
  }
  if (error instanceof StaleVersion) {
    const { current, changedFields } = error;
    return problemOf('stale-version', 'Someone else has changed it since you loaded it.', {
      current,
      changed: [...changedFields],
    });
  }
  if (error instanceof Refused) {
    const { code, findings, nearest } = error;
    const detail =
      code === 'stops'
        ? 'At least one check says that it cannot stand there.'
        : 'It can stand there if someone gives a reason for each caution.';
    return problemOf(code, detail, { findings: [...findings], nearest: [...nearest] });
  }
  if (error instanceof Conflict) {
    const detail = conflictSentences[error.code] ?? 'What is there now does not allow this.';
    const code = error.code === 'key-reused' ? 'key-reused' : 'conflict';
    return { ...problemOf(code, detail, { current: error.facts }), code: error.code };
  }
  return null;
}
