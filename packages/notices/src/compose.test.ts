import { isSkipped } from '@strikeboard/domain/zone';
import { describe, expect, it } from 'vitest';
import { composeWith } from './compose.ts';
import type { PersonSituation, Situation } from './ports.ts';
import { countSegments } from './segments.ts';
import { at, facts, PERSON_ID, person, situation } from './testing.ts';

// Words and what they carry: common practice, no source. Site Denver, readers elsewhere, machine Chatham.
const compose = composeWith({ quietHours: null });

function told(one: PersonSituation, change: Partial<Situation> = {}) {
  return compose(situation([one], change));
}

function sms(one: PersonSituation, change: Partial<Situation> = {}): string | undefined {
  return told(one, change).notices.find(({ channel }) => channel === 'sms')?.body;
}

describe('a first message', () => {
  it('carries company, day, start, first truck, address, yards, finish, how to answer, and the link last', () => {
    expect(sms(person())).toBe(
      'Cedar Flat Concrete: Tue Dec 8. Be there 6:30 AM, first truck 7:15 AM. Elm St garage, 412 Elm St, Longmont CO. 32 yd3, broom finish. Reply YES or NO (STOP ends texts), or tap {link}',
    );
  });

  it('says the same in Spanish, in letters that GSM 7-bit has', () => {
    expect(sms(person({ language: 'es' }))).toBe(
      'Cedar Flat Concrete: mar 8 dic. Entrada 6:30, primer camion 7:15. Elm St garage, 412 Elm St, Longmont CO. 32 yd3, acabado escobillado. Conteste SI o NO (STOP para no recibir mas), o toque {link}',
    );
  });

  it('offers work to a sub', () => {
    expect(sms(person({ relation: 'offer' }))).toMatch(/^Cedar Flat Concrete offers you work Tue Dec 8\. /);
  });

  it('names the zone for a reader whose clock differs', () => {
    const text = sms(person({ zone: 'America/Chicago' }));
    expect(text).toContain('Be there 6:30 AM MST, first truck 7:15 AM MST.');
    // Phoenix shows the same clock as Denver in winter, and another in summer (IANA tz database).
    expect(sms(person({ zone: 'America/Phoenix' }))).toContain('Be there 6:30 AM, ');
    const july = facts({ day: '2026-07-07', crewStartMs: at('2026-07-07', '6:30'), firstLoadMs: null });
    expect(
      sms(person({ zone: 'America/Phoenix', now: july }), { nowMs: at('2026-07-06', '12:00') }),
    ).toContain('Be there 6:30 AM MDT.');
  });

  it('names the day of a first truck after midnight', () => {
    const night = facts({
      crewStartMs: at('2026-12-08', '23:30'),
      firstLoadMs: at('2026-12-09', '0:15'),
    });
    expect(sms(person({ now: night }))).toContain('Be there 11:30 PM, first truck 12:15 AM Wed Dec 9.');
  });

  it('names the work of a visit without concrete, and no truck', () => {
    const saw = facts({ partYd3: null, finish: null, firstLoadMs: null, title: 'Saw cut' });
    expect(sms(person({ now: saw }))).toContain(
      'Be there 6:30 AM. Elm St garage, 412 Elm St, Longmont CO. Saw cut. Reply',
    );
  });

  it('gives a metric company cubic metres', () => {
    // 32 yd3 = 24.4657554... m3 (NIST SP 811, the international yard).
    expect(sms(person(), { units: 'metric' })).toContain(' 24.47 m3, broom finish.');
  });

  it('goes by text and by mail, and by mail alone after STOP', () => {
    const both = told(person({ email: 'ana@example.com' }));
    expect(both.notices.map(({ channel, toAddress }) => [channel, toAddress])).toEqual([
      ['sms', '+13035550123'],
      ['email', 'ana@example.com'],
    ]);
    const silenced = told(person({ email: 'ana@example.com', silenced: true }));
    expect(silenced.notices.map(({ channel }) => channel)).toEqual(['email']);
    expect(silenced.told).toHaveLength(1);
  });

  it('leaves untold whom nothing reaches', () => {
    expect(told(person({ phoneE164: null }))).toEqual({ notices: [], told: [] });
    expect(told(person({ silenced: true }))).toEqual({ notices: [], told: [] });
  });

  it('keeps the facts as they were told', () => {
    expect(told(person()).told).toEqual([{ personId: PERSON_ID, facts: facts(), asksAnew: false }]);
  });
});

describe('an e-mail', () => {
  it('is properly spelled and carries safety and local code', () => {
    const [, mail] = told(person({ language: 'es', email: 'ana@example.com' })).notices;
    expect(mail?.subject).toBe(
      'martes 8 de diciembre, 6:30: Elm St garage, 412 Elm St, Longmont CO (Cedar Flat Concrete)',
    );
    expect(mail?.body).toContain('Primer camión: 7:15\n');
    expect(mail?.body).toContain('Concreto: 32 yd³, acabado escobillado\n');
    expect(mail?.body).toContain('Diga sí o no aquí: {link}\n');
    expect(mail?.body).toContain('el concreto fresco quema la piel y los ojos');
    expect(mail?.body).toContain('códigos de construcción');
  });

  it('lists what changed', () => {
    const later = facts({ crewStartMs: at('2026-12-08', '7:15'), firstLoadMs: at('2026-12-08', '8:00') });
    const [, mail] = told(person({ told: facts(), now: later, email: 'ana@example.com' })).notices;
    expect(mail?.subject).toMatch(/^Changed: Tuesday, December 8, 7:15 AM, /);
    expect(mail?.body).toContain(
      'What changed:\n- Start moved from 6:30 AM to 7:15 AM\n- First truck moved from 7:15 AM to 8:00 AM\n\n',
    );
    expect(mail?.body).toContain('Wet concrete burns skin and eyes'.slice(4));
  });
});

describe('a change', () => {
  it.each([
    [
      'the start and the truck',
      { crewStartMs: at('2026-12-08', '7:15'), firstLoadMs: at('2026-12-08', '8:00') },
      'Cedar Flat Concrete: change for Tue Dec 8. Start moved from 6:30 AM to 7:15 AM. First truck moved from 7:15 AM to 8:00 AM. Elm St garage, 412 Elm St, Longmont CO. 32 yd3, broom finish. Reply YES or NO, or tap {link}',
    ],
    [
      'the day alone, same clock',
      {
        day: '2026-12-09',
        crewStartMs: at('2026-12-09', '6:30'),
        firstLoadMs: at('2026-12-09', '7:15'),
      },
      'Cedar Flat Concrete: change for Wed Dec 9. Day moved from Tue Dec 8 to Wed Dec 9. Be there 6:30 AM, first truck 7:15 AM. Elm St garage, 412 Elm St, Longmont CO. 32 yd3, broom finish. Reply YES or NO, or tap {link}',
    ],
    [
      'yards, finish and address',
      { partYd3: 34.25, finish: 'exposed' as const, address: '9 Oak Ave' },
      'Cedar Flat Concrete: change for Tue Dec 8. Address is now 9 Oak Ave, not 412 Elm St, Longmont CO. Now 34.25 yd3, not 32 yd3. Finish is now exposed aggregate, not broom. Be there 6:30 AM, first truck 7:15 AM. Reply YES or NO, or tap {link}',
    ],
    [
      'the truck alone',
      { firstLoadMs: null },
      'Cedar Flat Concrete: change for Tue Dec 8. First truck has no time yet. Be there 6:30 AM. Elm St garage, 412 Elm St, Longmont CO. 32 yd3, broom finish. Reply YES or NO, or tap {link}',
    ],
  ])('says %s', (_name, change, text) => {
    const composed = told(person({ told: facts(), now: facts(change) }));
    expect(composed.notices.map(({ body }) => body)).toEqual([text]);
    expect(composed.told).toEqual([{ personId: PERSON_ID, facts: facts(change), asksAnew: true }]);
  });

  it('across a change of clocks is by the clock on the wall', () => {
    // Denver left summer time on 2026-11-01 at 2:00 (IANA tz database): 24 hours on the wall are 25.
    const before = facts({
      day: '2026-10-31',
      crewStartMs: at('2026-10-31', '6:30'),
      firstLoadMs: at('2026-10-31', '7:15'),
    });
    const after = facts({
      day: '2026-11-01',
      crewStartMs: at('2026-11-01', '6:30'),
      firstLoadMs: at('2026-11-01', '7:15'),
    });
    expect(after.crewStartMs - before.crewStartMs).toBe(25 * 3_600_000);
    const text = sms(person({ told: before, now: after }), { nowMs: at('2026-10-30', '12:00') });
    expect(text).toContain('Day moved from Sat Oct 31 to Sun Nov 1. Be there 6:30 AM,');
    expect(text).not.toContain('Start moved');
  });

  it('between the two 1:30s of an autumn night names the zones', () => {
    const first = at('2026-11-01', '1:30');
    const early = facts({ day: '2026-11-01', crewStartMs: first, firstLoadMs: null });
    const late = facts({ day: '2026-11-01', crewStartMs: first + 3_600_000, firstLoadMs: null });
    expect(isSkipped('2026-11-01', 90, 'America/Denver')).toBe(false);
    expect(sms(person({ told: early, now: late }), { nowMs: at('2026-10-30', '12:00') })).toContain(
      'Start moved from 1:30 AM MDT to 1:30 AM MST.',
    );
  });

  it.each([
    ['there and back', {}],
    ['a renamed company, site and pour', { companyName: 'Cedar', siteName: 'Lot 4', title: 'Slab' }],
    ['an address respaced', { address: ' 412 Elm St,  Longmont CO ' }],
  ])('of no weight sends nothing: %s', (_name, change) => {
    const composed = told(person({ told: facts(), now: facts(change) }));
    expect(composed).toEqual({
      notices: [],
      told: [{ personId: PERSON_ID, facts: facts(change), asksAnew: false }],
    });
  });
});

describe('work that is off', () => {
  it('was called off', () => {
    const composed = told(person({ told: facts(), now: facts({ calledOff: true }), relation: 'off' }), {
      visitState: 'called-off',
    });
    expect(composed.notices[0]?.body).toBe(
      'Cedar Flat Concrete: CALLED OFF. Tue Dec 8, 6:30 AM, Elm St garage, 412 Elm St, Longmont CO. Do not come.',
    );
    expect(composed.told[0]?.facts.calledOff).toBe(true);
  });

  it('went back to waiting, or to pencil', () => {
    for (const visitState of ['waiting', 'pencilled'] as const) {
      expect(sms(person({ told: facts(), now: null, relation: 'off' }), { visitState })).toMatch(
        /^Cedar Flat Concrete: put off\. Tue Dec 8, 6:30 AM, .* Do not come then/,
      );
    }
  });

  it('is off for this person alone', () => {
    expect(sms(person({ told: facts(), now: null, relation: 'off', language: 'es' }))).toBe(
      'Cedar Flat Concrete: ya no esta en el trabajo mar 8 dic, 6:30, Elm St garage, 412 Elm St, Longmont CO. No venga a ese.',
    );
  });

  it('is said once', () => {
    const off = facts({ calledOff: true });
    expect(told(person({ told: off, now: null, relation: 'off' }))).toEqual({ notices: [], told: [] });
  });

  it('is not said to whoever was never told, or said no', () => {
    expect(told(person({ now: null, relation: 'off' }))).toEqual({ notices: [], told: [] });
    const declined = person({ told: facts(), saidNo: true, now: null, relation: 'off' });
    expect(told(declined)).toEqual({ notices: [], told: [] });
  });

  it('is on again as if for the first time', () => {
    expect(sms(person({ told: facts({ calledOff: true }) }))).toMatch(
      /^Cedar Flat Concrete: Tue Dec 8\. Be there/,
    );
    const askedAnew = told(person({ told: facts(), saidNo: true, relation: 'offer' }));
    expect(askedAnew.notices[0]?.body).toMatch(/ offers you work /);
    expect(askedAnew.told[0]?.asksAnew).toBe(true);
  });
});

describe('what is past', () => {
  it('is told to nobody', () => {
    const composed = told(person(), { nowMs: at('2026-12-09', '6:30') });
    expect(composed).toEqual({
      notices: [],
      told: [{ personId: PERSON_ID, facts: facts(), asksAnew: false }],
    });
    expect(told(person(), { visitState: 'done' })).toEqual({ notices: [], told: [] });
  });

  it('is told when it moved to a day to come', () => {
    const next = facts({ day: '2026-12-14', crewStartMs: at('2026-12-14', '6:30'), firstLoadMs: null });
    expect(sms(person({ told: facts(), now: next }), { nowMs: at('2026-12-10', '9:00') })).toContain(
      'Day moved from Tue Dec 8 to Mon Dec 14.',
    );
  });
});

describe('typed text in messages', () => {
  it('cannot break the line, take the place of the link or turn the direction of writing', () => {
    const odd = facts({
      companyName: 'Cedar\r\nBcc: x@example.com',
      siteName: '{link}',
      address: '12 \u202EElm St',
    });
    const [text, mail] = told(person({ now: odd, email: 'ana@example.com' })).notices;
    expect(text?.body.match(/\{link\}/g)).toHaveLength(1);
    expect(text?.body).toContain('Cedar Bcc: x@example.com: ');
    expect(text?.body).toContain('(link), 12 Elm St.');
    expect(mail?.subject).not.toMatch(/[\r\n]/);
  });

  it('is spelled in GSM 7-bit and clipped', () => {
    const long = facts({ companyName: 'Peña’s Concreto “Río” 👷', siteName: 'x'.repeat(200) });
    const text = sms(person({ now: long, language: 'es' })) ?? '';
    expect(text).toMatch(/^Peña's Concreto "Rio": /);
    expect(text).toContain(`X${'x'.repeat(56)}..., 412 Elm St`);
    expect(countSegments(text).encoding).toBe('gsm-7');
  });
});

describe('quiet hours', () => {
  const quiet = composeWith({ quietHours: { fromMin: 21 * 60, untilMin: 8 * 60 } });

  it('hold a text back, and no e-mail', () => {
    const nowMs = at('2026-12-06', '22:00', 'America/Chicago');
    const one = person({ zone: 'America/Chicago', email: 'ana@example.com' });
    const notices = quiet(situation([one], { nowMs })).notices;
    expect(notices.map(({ sendAtMs }) => sendAtMs)).toEqual([
      at('2026-12-07', '8:00', 'America/Chicago'),
      nowMs,
    ]);
  });

  it('do not hold back what would come too late', () => {
    const nowMs = at('2026-12-07', '22:00');
    expect(quiet(situation([person()], { nowMs })).notices[0]?.sendAtMs).toBe(nowMs);
  });
});
