/**
 * What composing, sending and receiving need from a store. The database package has these methods by shape; the
 * worker and the webhooks are given them. Every method is one transaction, and everything but a person's silence
 * belongs to one company.
 */

import type { ToldFacts } from '@strikeboard/domain/told';
import type { Channel, Language, NoticeState, VisitState } from '@strikeboard/domain/vocabulary';

/** How a person stands to a visit now: holds a shift, has an open offer, or neither (was told of it before). */
export type Relation = 'shift' | 'offer' | 'off';

/** One person whom a change of the visit may concern. */
export interface PersonSituation {
  personId: string;
  name: string;
  /** E.164 (ITU-T E.164), as this company has it. */
  phoneE164: string | null;
  email: string | null;
  /** The number has said STOP. */
  silenced: boolean;
  language: Language;
  /** IANA zone that the person lives in; quiet hours are kept in it. */
  zone: string;
  relation: Relation;
  /** What they were last told of this visit; null: nothing. */
  told: ToldFacts | null;
  /**
   * True when they have said no since they were last told (a declined offer, a shift answered no). If they are on
   * the visit all the same, they have been asked anew and are told as for the first time.
   */
  saidNo: boolean;
  /**
   * The plan as it concerns them; null for `off`, and for everyone while the visit is waiting or pencilled. Of a
   * visit called off: its facts with `calledOff`.
   */
  now: ToldFacts | null;
}

/** Everything that composing needs to know of one visit. */
export interface Situation {
  companyId: string;
  visitId: string;
  /** State of the visit. While it is waiting or pencilled everyone's relation is `off`. */
  visitState: VisitState;
  units: 'us' | 'metric';
  nowMs: number;
  people: PersonSituation[];
}

/** A message to be written as a row of notices, state `queued`. */
export interface ComposedNotice {
  personId: string;
  channel: Channel;
  language: Language;
  /** E.164 or an e-mail address. */
  toAddress: string;
  /** null for SMS. */
  subject: string | null;
  /** Plain text. Where the link belongs it says `{link}`: its token is made at sending and never stored. */
  body: string;
  /** Not to be sent before this instant (quiet hours); at least `nowMs`. The job's run_at. */
  sendAtMs: number;
}

/** What a person has been told by this composing. */
export interface ToldNow {
  personId: string;
  facts: ToldFacts;
  /** An earlier answer was to other facts: the held shift's answer goes back to `none`. */
  asksAnew: boolean;
}

export interface Composed {
  notices: ComposedNotice[];
  told: ToldNow[];
}

/** Pure: called inside the transaction, possibly again when it is retried. */
export type Compose = (situation: Situation) => Composed;

/** A notice taken for sending. */
export interface NoticeToSend {
  companyId: string;
  noticeId: string;
  channel: Channel;
  language: Language;
  toAddress: string;
  subject: string | null;
  /** With `{link}` where `linkToken` belongs. */
  body: string;
  /** The number has said STOP (read now, not at composing). Always false for e-mail. */
  silenced: boolean;
  /** Attempts including this one, from 1. */
  attempts: number;
  /** Token of a link made for this notice's visit and person, when the body asks for one; only its hash is stored. */
  linkToken: string | null;
}

/** The columns of a notice that sending and delivery reports change. */
export interface NoticeProgress {
  state: NoticeState;
  providerId: string | null;
  errorCode: string | null;
  /** A sentence for people; no number, address or text of the message. */
  error: string | null;
}

export interface NoticeKey {
  companyId: string;
  noticeId: string;
}

/** What the worker's tasks need. */
export interface NoticeStore extends NoticeProgressStore {
  /**
   * Composes for one visit what has settled:
   * 1. Locks the visit's pending outbox rows (`done_at` null). None: `{ noticeIds: [] }`.
   * 2. If the newest of them is not due at `nowMs`, changes nothing but adds a `tell-visit` job for when it is (so
   *    that later changes fold into one notice, and a skew of clocks loses none): `{ noticeIds: [] }`.
   * 3. Reads the situation (everyone with a held shift, an open offer, or a row in `told`) and calls `compose`.
   * 4. Writes the notices, a `send-notice` job `{ companyId, noticeId }` for each at its `sendAtMs`, the told facts
   *    (`told_at` = `nowMs`) and their answers, and `done_at` of the rows. Notices of the same visit, person and
   *    channel that are still `queued` become `failed` with error code `superseded`, so none arrives after this one.
   */
  composeDue(
    input: { companyId: string; visitId: string; nowMs: number },
    compose: Compose,
  ): Promise<{ noticeIds: string[] }>;

  /**
   * Takes a notice for sending, committed before the provider is called:
   * `queued` becomes `sending`, attempts grows by one, a link is made if the body has `{link}`, and it is returned.
   * `sending` becomes `unsure` with error code `interrupted`: a crash came between the provider's call and its
   * record, so it is not sent again blindly; null. Any other state, or no such notice: null.
   */
  takeForSending(input: NoticeKey & { nowMs: number }): Promise<NoticeToSend | null>;
}

/** What the tasks, and the webhook of delivery reports, need. */
export interface NoticeProgressStore {
  /**
   * Locks the notice (by its key, or by the provider's id, across companies), and writes what `decide` makes of it;
   * `decide` returns null to leave it. `sent_at` is set on the first `sent` or `delivered`, `delivered_at` on the
   * first `delivered`, both to `nowMs`. Returns the progress as it now is; null: no such notice.
   */
  changeNotice(
    which: (NoticeKey | { providerId: string }) & { nowMs: number },
    decide: (current: NoticeProgress) => NoticeProgress | null,
  ): Promise<NoticeProgress | null>;
}

/** The question that a number was last asked. */
export interface OpenQuestion {
  companyId: string;
  visitId: string;
  personId: string;
  language: Language;
  /** What the person was told and answers to. */
  facts: ToldFacts;
}

/**
 * `recorded`: kept (also when it was the same answer as before); `not-free`: an offer taken, but the time is gone;
 * `not-asked`: no longer on the visit, or it is called off.
 */
export type AnswerOutcome = 'recorded' | 'not-free' | 'not-asked';

/** What the webhook of texts that people send needs. */
export interface InboundStore {
  /** From now on no company's text goes to the number. Repeating it changes nothing. */
  silence(input: { phoneE164: string; nowMs: number }): Promise<void>;
  /** Ends a silence. Without one it changes nothing. */
  unsilence(input: { phoneE164: string }): Promise<void>;
  isSilenced(input: { phoneE164: string }): Promise<boolean>;
  /**
   * The newest SMS to the number, across companies, that is `sending`, `sent`, `delivered` or `unsure`, whose person is still
   * on the visit or has an open or declined offer of it, and whose visit has not ended at `nowMs`; null: there is none.
   */
  latestForPhone(input: { phoneE164: string; nowMs: number }): Promise<OpenQuestion | null>;
  /** Records a person's answer as the link page does: shift or offer, board change and all. */
  answer(input: {
    companyId: string;
    visitId: string;
    personId: string;
    answer: 'yes' | 'no';
    nowMs: number;
  }): Promise<AnswerOutcome>;
}
