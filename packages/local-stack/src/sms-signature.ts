import { createHmac } from 'node:crypto';

/**
 * The provider's signature of a webhook: base64 of HMAC-SHA1, keyed with the account's token, over the
 * full URL followed by each parameter's name and value, sorted by name. Source: the provider's
 * documentation of webhook security (published).
 */
export function signWebhook(authToken: string, url: string, parameters: Record<string, string>): string {
  const sorted = Object.keys(parameters).toSorted();
  const signed = url + sorted.map((name) => `${name}${parameters[name]}`).join('');
  return createHmac('sha1', authToken).update(signed, 'utf8').digest('base64');
}
