import { z } from 'zod';
import { contract } from '../contract.ts';

/** Called by the SMS provider with a form and a signature; not by us. */
const providerAnswer = z.unknown();

export const smsStatus = contract({
  method: 'POST',
  path: '/api/sms/status',
  summary: "The SMS provider's report on a text (signed form)",
  access: 'open',
  output: providerAnswer,
});

export const smsInbound = contract({
  method: 'POST',
  path: '/api/sms/inbound',
  summary: 'A text that someone sent to our number (signed form)',
  access: 'open',
  output: providerAnswer,
});
