import { publicUrl, verifySignature } from '@strikeboard/notices/inbound';
import type { APIContext } from 'astro';
import { ProblemError } from '../api/problems.ts';
import { readBytes } from '../api/read-body.ts';
import { noticesConfig } from './notices.ts';

const LIMIT_BYTES = 64 * 1024;

/** A form that the SMS provider has posted. @throws ProblemError 415, 413, and 403 unless its signature is right */
export async function readSignedForm({ request, url }: APIContext): Promise<Record<string, string>> {
  const type = request.headers.get('content-type')?.split(';')[0]?.trim().toLowerCase();
  if (type !== 'application/x-www-form-urlencoded') {
    throw new ProblemError('wrong-type', 'Send application/x-www-form-urlencoded.');
  }
  const text = new TextDecoder().decode(await readBytes(request, LIMIT_BYTES));
  const form = Object.fromEntries(new URLSearchParams(text));
  const { smsAuthToken, appOrigin } = noticesConfig();
  const isSigned = verifySignature({
    authToken: smsAuthToken,
    signature: request.headers.get('x-twilio-signature'),
    url: publicUrl(appOrigin, url),
    form,
  });
  if (!isSigned) throw new ProblemError('bad-signature', 'The signature does not belong to this request.');
  return form;
}
