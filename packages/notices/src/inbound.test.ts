import { InputProblem } from '@strikeboard/domain/problem';
import { describe, expect, it } from 'vitest';
import { publicUrl, receiveText, verifySignature } from './inbound.ts';
import type { AnswerOutcome, InboundStore, OpenQuestion } from './ports.ts';
import { COMPANY_ID, facts, PERSON_ID, VISIT_ID } from './testing.ts';

describe("the provider's signature", () => {
  const call = {
    CallSid: 'CA1234567890ABCDE',
    Caller: '+14158675309',
    Digits: '1234',
    From: '+14158675309',
    To: '+18005551212',
  };
  const url = 'https://mycompany.com/myapp.php?foo=1&bar=2';
  const text = {
    Body: 'Pour 7:00 👷',
    From: '+12125550123',
    To: '+12125550199',
    MessageSid: 'SM00000000000000000000000000000001',
  };

  it.each([
    // Test vector of the provider's SDKs (published).
    ['five parameters', url, call, 'RSOYDt4T1cUTdK1PDd93/VVr8B8='],
    // Newer example of the provider's documentation (from memory; recomputed).
    [
      'another caller',
      url,
      { ...call, Caller: '+12349013030', From: '+12349013030' },
      '0/KCTR6DLpKmkAf8muzZqo1nDgQ=',
    ],
    // HMAC-SHA1 over the address and the sorted parameters in UTF-8 (arithmetic).
    ['none', url, {}, 'zYQTYrRWXE7LtzbG4PfP7/bkkGo='],
    ['a picture in the body', 'https://example.com/sms', text, 'K0bv0PbZx1Com511dO27XHeJeEQ='],
  ])('holds for %s', (_name, address, form, signature) => {
    expect(verifySignature({ authToken: '12345', signature, url: address, form })).toBe(true);
  });

  it.each([
    ['of http', { signature: 'OyGYPqTF6ztdbRNCvuQO/oPvqQ4=' }],
    ['without the parameters', { signature: 'zYQTYrRWXE7LtzbG4PfP7/bkkGo=' }],
    ['of another token', { authToken: '12346' }],
    ['of another path', { url: 'https://mycompany.com/other.php?foo=1&bar=2' }],
    ['of another digit', { form: { ...call, Digits: '1235' } }],
    ['with one parameter more', { form: { ...call, Extra: 'x' } }],
    ['that is absent', { signature: null }],
    ['that is empty', { signature: '' }],
    ['that is too long', { signature: 'RSOYDt4T1cUTdK1PDd93/VVr8B8=x' }],
  ])('fails %s', (_name, change) => {
    const good = { authToken: '12345', signature: 'RSOYDt4T1cUTdK1PDd93/VVr8B8=', url, form: call };
    expect(verifySignature({ ...good, ...change })).toBe(false);
  });

  it('is over the public address, whatever the proxy passes on', () => {
    const asSeen = new URL('http://127.0.0.1:4321/api/sms/status?company=1&notice=2');
    expect(publicUrl('https://board.example.com', asSeen)).toBe(
      'https://board.example.com/api/sms/status?company=1&notice=2',
    );
  });
});

/** The store's promises in memory, for one number. */
function storeWith(options: {
  question?: Partial<OpenQuestion> | null;
  silenced?: boolean;
  outcome?: AnswerOutcome;
}) {
  const question: OpenQuestion | null =
    options.question === null
      ? null
      : {
          companyId: COMPANY_ID,
          visitId: VISIT_ID,
          personId: PERSON_ID,
          language: 'en',
          facts: facts(),
          ...options.question,
        };
  let silenced = options.silenced ?? false;
  const answers: ('yes' | 'no')[] = [];
  const store: InboundStore = {
    silence: async () => {
      silenced = true;
    },
    unsilence: async () => {
      silenced = false;
    },
    isSilenced: async () => silenced,
    latestForPhone: async () => question,
    answer: async ({ answer }) => {
      answers.push(answer);
      return options.outcome ?? 'recorded';
    },
  };
  return { store, answers, isSilenced: () => silenced };
}

const PHONE = '+13035550123';
const EMPTY = '<?xml version="1.0" encoding="UTF-8"?><Response/>';
const saying = (text: string) =>
  `<?xml version="1.0" encoding="UTF-8"?><Response><Message>${text}</Message></Response>`;

function receive(store: InboundStore, body: string, from = PHONE) {
  return receiveText({ store, form: { From: from, Body: body }, nowMs: 0 });
}

describe('a text that someone sent', () => {
  it.each([
    [
      'YES',
      'yes',
      'Thank you. Cedar Flat Concrete has your YES: Tue Dec 8, 6:30 AM, Elm St garage, 412 Elm St, Longmont CO.',
    ],
    [
      'no',
      'no',
      'Cedar Flat Concrete has your NO: Tue Dec 8, 6:30 AM, Elm St garage, 412 Elm St, Longmont CO.',
    ],
  ] as const)('%s is recorded and repeated', async (body, answer, reply) => {
    const { store, answers } = storeWith({});
    const result = await receive(store, body);
    expect(result).toEqual({
      twiml: saying(reply),
      kind: answer,
      answered: { companyId: COMPANY_ID, visitId: VISIT_ID, personId: PERSON_ID },
    });
    expect(answers).toEqual([answer]);
  });

  it('is answered in the language of the question', async () => {
    const { store } = storeWith({ question: { language: 'es' } });
    expect((await receive(store, 'Sí')).twiml).toBe(
      saying(
        'Gracias. Cedar Flat Concrete tiene su SI: mar 8 dic, 6:30, Elm St garage, 412 Elm St, Longmont CO.',
      ),
    );
  });

  it.each([
    ['not-free', 'so your YES was not taken'],
    ['not-asked', 'you are no longer asked'],
  ] as const)('that comes too late (%s) says so', async (outcome, words) => {
    const result = await receive(storeWith({ outcome }).store, 'yes');
    expect(result.twiml).toContain(words);
    expect(result.answered).toBeNull();
  });

  it('that is unclear records nothing and asks again', async () => {
    const { store, answers } = storeWith({});
    expect((await receive(store, 'yes but not before 8')).twiml).toContain('reply YES or NO for Tue Dec 8');
    expect(answers).toEqual([]);
  });

  it('with nothing asked says so, in the language of the text', async () => {
    const { store } = storeWith({ question: null });
    expect((await receive(store, 'yes')).twiml).toContain('There is no work waiting');
    expect((await receive(store, 'sí')).twiml).toContain('No hay trabajo');
  });

  it('STOP silences, and the provider does the talking', async () => {
    const { store, answers, isSilenced } = storeWith({});
    expect((await receive(store, 'Stop')).twiml).toBe(EMPTY);
    expect(isSilenced()).toBe(true);
    expect(answers).toEqual([]);
  });

  it('asking to stop in words the provider does not know is confirmed once', async () => {
    const { store, isSilenced } = storeWith({ question: { language: 'es' } });
    expect((await receive(store, 'no más mensajes')).twiml).toContain('Ya no llegaran mensajes');
    expect(isSilenced()).toBe(true);
  });

  it('START frees', async () => {
    const { store, isSilenced } = storeWith({ silenced: true });
    expect((await receive(store, 'start')).twiml).toBe(EMPTY);
    expect(isSilenced()).toBe(false);
  });

  it('from a silenced number counts, frees nothing and gets no reply', async () => {
    const { store, answers, isSilenced } = storeWith({ silenced: true });
    expect((await receive(store, 'YES')).twiml).toBe(EMPTY);
    expect((await receive(store, 'what?')).twiml).toBe(EMPTY);
    expect(answers).toEqual(['yes']);
    expect(isSilenced()).toBe(true);
  });

  it('asking for help gets it', async () => {
    expect((await receive(storeWith({}).store, 'ayuda')).twiml).toContain('Reply STOP to end');
  });

  it('gets an answer that is safe in XML', async () => {
    const odd = facts({ companyName: 'A & B <Concrete>' });
    const { twiml } = await receive(storeWith({ question: { facts: odd } }).store, 'yes');
    expect(twiml).toContain('A &amp; B &lt;Concrete&gt; has your YES');
  });

  // ITU-T E.164: a plus and up to 15 digits, the first not 0 (published).
  it.each(['', '4155552671', '+0123456789', '+1 415 555 2671', '+1234567890123456', 'anonymous'])(
    'from no number is refused: %s',
    async (from) => {
      await expect(receive(storeWith({}).store, 'yes', from)).rejects.toThrow(InputProblem);
    },
  );
});
