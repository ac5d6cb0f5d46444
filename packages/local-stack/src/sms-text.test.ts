import { describe, expect, it } from 'vitest';
import { signWebhook } from './sms-signature.ts';
import { countSegments, repliesInTwiml } from './sms-text.ts';

// 3GPP TS 23.038 and 23.040: 160 septets or 70 UTF-16 units alone, 153 or 67 in a part; a character of
// the extension table takes two septets and is not split between parts.
describe('countSegments', () => {
  it.each([
    ['a'.repeat(160), 1],
    ['a'.repeat(161), 2],
    ['a'.repeat(306), 2],
    ['a'.repeat(307), 3],
    ['€'.repeat(80), 1],
    ['€'.repeat(81), 2],
    [`${'a'.repeat(158)}[`, 1],
    [`${'a'.repeat(159)}[`, 2],
    [`${'a'.repeat(152)}€${'a'.repeat(152)}`, 3],
    ['👷'.repeat(35), 1],
    ['👷'.repeat(36), 2],
    ['9.5 yd³ '.repeat(9), 2],
    ['9.5 yd3 '.repeat(9), 1],
  ])('%# counts %s', (text, parts) => {
    expect(countSegments(text)).toBe(parts);
  });
});

describe('signWebhook', () => {
  const form = {
    CallSid: 'CA1234567890ABCDE',
    Caller: '+14158675309',
    Digits: '1234',
    From: '+14158675309',
    To: '+18005551212',
  };

  // The worked example of the provider's documentation and of its SDK's tests.
  it('gives the documented signature', () => {
    const url = 'https://mycompany.com/myapp.php?foo=1&bar=2';
    expect(signWebhook('12345', url, form)).toBe('RSOYDt4T1cUTdK1PDd93/VVr8B8=');
  });

  // Arithmetic with the same rule, in another language.
  it('signs scheme, empty forms and text outside ASCII as they are', () => {
    expect(signWebhook('12345', 'http://mycompany.com/myapp.php?foo=1&bar=2', form)).toBe(
      'OyGYPqTF6ztdbRNCvuQO/oPvqQ4=',
    );
    expect(signWebhook('12345', 'https://mycompany.com/myapp.php?foo=1&bar=2', {})).toBe(
      'zYQTYrRWXE7LtzbG4PfP7/bkkGo=',
    );
    const text = {
      Body: 'Pour 7:00 👷',
      From: '+12125550123',
      To: '+12125550199',
      MessageSid: 'SM00000000000000000000000000000001',
    };
    expect(signWebhook('12345', 'https://example.com/sms', text)).toBe('K0bv0PbZx1Com511dO27XHeJeEQ=');
  });
});

// The provider's documentation of TwiML's <Message>: text inside it, or in a <Body>.
it('repliesInTwiml reads both forms and XML entities', () => {
  const twiml =
    '<?xml version="1.0"?><Response><Message>See you at 6 &amp; bring boots</Message><Message to="+1"><Body>&#55;:00</Body></Message></Response>';
  expect(repliesInTwiml(twiml)).toEqual(['See you at 6 & bring boots', '7:00']);
  expect(repliesInTwiml('<Response/>')).toEqual([]);
});
