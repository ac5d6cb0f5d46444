import type { SmsMessage } from './sms-types.ts';

/** The provider's JSON of a message; its dates are in RFC 2822's form. */
export function messageResource(accountSid: string, message: SmsMessage) {
  const uri = `/2010-04-01/Accounts/${accountSid}/Messages/${message.sid}`;
  const rfc2822 = (iso: string) => new Date(iso).toUTCString().replace('GMT', '+0000');
  return {
    account_sid: accountSid,
    api_version: '2010-04-01',
    body: message.body,
    date_created: rfc2822(message.createdAt),
    date_sent: message.status === 'queued' ? null : rfc2822(message.updatedAt),
    date_updated: rfc2822(message.updatedAt),
    direction: message.direction,
    error_code: message.errorCode,
    error_message: null,
    from: message.from,
    messaging_service_sid: null,
    num_media: '0',
    num_segments: String(message.segments),
    price: null,
    price_unit: 'USD',
    sid: message.sid,
    status: message.status,
    subresource_uris: { media: `${uri}/Media.json` },
    to: message.to,
    uri: `${uri}.json`,
  };
}

/** What the provider posts to the application when a person has sent a text. */
export function inboundForm(accountSid: string, message: SmsMessage): Record<string, string> {
  return {
    AccountSid: accountSid,
    ApiVersion: '2010-04-01',
    Body: message.body,
    From: message.from,
    FromCountry: 'US',
    MessageSid: message.sid,
    NumMedia: '0',
    NumSegments: String(message.segments),
    SmsMessageSid: message.sid,
    SmsSid: message.sid,
    SmsStatus: 'received',
    To: message.to,
    ToCountry: 'US',
  };
}

/** What the provider posts to the StatusCallback address of a text. */
export function statusForm(accountSid: string, message: SmsMessage): Record<string, string> {
  const form = {
    AccountSid: accountSid,
    ApiVersion: '2010-04-01',
    From: message.from,
    MessageSid: message.sid,
    MessageStatus: message.status,
    SmsSid: message.sid,
    SmsStatus: message.status,
    To: message.to,
  };
  return message.errorCode === null ? form : { ...form, ErrorCode: String(message.errorCode) };
}
