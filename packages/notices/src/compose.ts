import { MS_PER_HOUR } from '@strikeboard/domain/interval';
import { calledOffFacts, type ToldFacts } from '@strikeboard/domain/told';
import type { Channel } from '@strikeboard/domain/vocabulary';
import { type ChangedFact, changedFacts, changeSentences } from './changes.ts';
import { factsText, oneLine, type Style } from './facts-text.ts';
import { toGsm7 } from './gsm-7.ts';
import { mailOf, smsOf } from './message.ts';
import type { Compose, Composed, ComposedNotice, PersonSituation, Situation, ToldNow } from './ports.ts';
import { type QuietHours, sendAtMs } from './quiet-hours.ts';
import type { NoticeKind } from './words/words.ts';

/** Nobody is told of what began longer ago than this. */
const PAST_AFTER_MS = 12 * MS_PER_HOUR;

interface Due {
  kind: NoticeKind;
  /** What the message is about: the plan, or, of work that is off, what they were told. */
  facts: ToldFacts;
  told: ToldFacts | null;
  changed: ChangedFact[];
}

/** The composer of messages, from what each person was told against the plan as it is now. */
export function composeWith(options: { quietHours: QuietHours | null }): Compose {
  return (situation) => {
    const composed: Composed = { notices: [], told: [] };
    if (situation.visitState === 'done') return composed;
    for (const person of situation.people) {
      const one = composeFor(person, situation, options.quietHours);
      composed.notices.push(...one.notices);
      composed.told.push(...one.told);
    }
    return composed;
  };
}

function composeFor(
  person: PersonSituation,
  situation: Situation,
  quietHours: QuietHours | null,
): { notices: ComposedNotice[]; told: ToldNow[] } {
  const { personId, told, now } = person;
  const due = dueFor(person, situation);
  if (due === null) {
    const renamed = told !== null && now !== null && isOn(person) && !person.saidNo;
    return { notices: [], told: renamed ? [{ personId, facts: now, asksAnew: false }] : [] };
  }
  const isOff = due.kind === 'called-off' || due.kind === 'put-off' || due.kind === 'taken-off';
  const facts = isOff ? calledOffFacts(due.facts) : due.facts;
  const toldNow = { personId, facts, asksAnew: due.kind === 'changed' || person.saidNo };
  const starts = [due.told?.crewStartMs, due.facts.crewStartMs].filter((ms) => ms !== undefined);
  if (Math.max(...starts) + PAST_AFTER_MS < situation.nowMs) return { notices: [], told: [toldNow] };
  const notices = reachableBy(person).map(({ channel, toAddress }): ComposedNotice => {
    const style: Style = {
      language: person.language,
      units: situation.units,
      readerZone: person.zone,
      length: channel === 'sms' ? 'short' : 'full',
    };
    const input = {
      kind: due.kind,
      text: factsText(due.facts, style),
      changed: due.changed,
      changes: due.told === null ? [] : changeSentences(due.changed, due.told, due.facts, style),
      language: person.language,
      name: oneLine(person.name, 60),
    };
    const message = channel === 'sms' ? { subject: null, body: toGsm7(smsOf(input)) } : mailOf(input);
    const ahead = starts.filter((ms) => ms >= situation.nowMs);
    const startMs = ahead.length > 0 ? Math.min(...ahead) : null;
    const at =
      channel === 'sms'
        ? sendAtMs({ nowMs: situation.nowMs, zone: person.zone, quietHours, startMs })
        : situation.nowMs;
    return { personId, channel, language: person.language, toAddress, ...message, sendAtMs: at };
  });
  // Whom nothing reaches has not been told, and the board goes on saying so.
  return notices.length === 0 ? { notices, told: [] } : { notices, told: [toldNow] };
}

/** What the person has to be told; null: nothing. */
function dueFor(person: PersonSituation, { visitState }: Situation): Due | null {
  const { told, now } = person;
  const expected = told !== null && !told.calledOff && !person.saidNo ? told : null;
  if (!isOn(person) || now === null) {
    if (expected === null) return null;
    const isCalledOff = visitState === 'called-off' || now?.calledOff === true;
    const isWaiting = visitState === 'waiting' || visitState === 'pencilled';
    const kind = isCalledOff ? 'called-off' : isWaiting ? 'put-off' : 'taken-off';
    return { kind, facts: expected, told: null, changed: [] };
  }
  if (expected === null) {
    const kind = person.relation === 'offer' ? 'offered' : 'assigned';
    return { kind, facts: now, told: null, changed: [] };
  }
  const changed = changedFacts(expected, now);
  return changed.length === 0 ? null : { kind: 'changed', facts: now, told: expected, changed };
}

/** Whether the person is to come. */
function isOn({ relation, now }: PersonSituation): boolean {
  return relation !== 'off' && now !== null && !now.calledOff;
}

function reachableBy({
  phoneE164,
  silenced,
  email,
}: PersonSituation): { channel: Channel; toAddress: string }[] {
  const ways: { channel: Channel; toAddress: string }[] = [];
  if (phoneE164 !== null && !silenced) ways.push({ channel: 'sms', toAddress: phoneE164 });
  if (email !== null) ways.push({ channel: 'email', toAddress: email });
  return ways;
}
