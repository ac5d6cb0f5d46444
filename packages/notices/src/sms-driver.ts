import twilio from 'twilio';
import { z } from 'zod';
import type { NoticesConfig } from './config.ts';
import type { SendResult } from './send-result.ts';

/** Hands texts to the SMS provider. */
export interface SmsDriver {
  /**
   * Sends one text. Never throws.
   * @param message.to E.164
   * @param message.statusUrl where the provider reports what became of it
   */
  send(message: { to: string; body: string; statusUrl: string }): Promise<SendResult>;
}

const DEFAULT_TIMEOUT_MS = 20_000;

/** The SDK's own client, for an API that stands at another address. */
class ClientOf extends twilio.RequestClient {
  private readonly baseUrl: string;

  constructor(baseUrl: string, timeout: number) {
    super({ timeout });
    this.baseUrl = baseUrl;
  }

  override request: InstanceType<typeof twilio.RequestClient>['request'] = (options) => {
    const { pathname, search } = new URL(options.uri);
    return super.request({ ...options, uri: `${this.baseUrl}${pathname}${search}` });
  };
}

/** The provider, through its own SDK. */
export function createSmsDriver(
  config: Pick<NoticesConfig, 'smsAccountSid' | 'smsAuthToken' | 'smsFrom' | 'smsBaseUrl'>,
  options: { timeoutMs?: number } = {},
): SmsDriver {
  const timeout = options.timeoutMs ?? DEFAULT_TIMEOUT_MS;
  const httpClient =
    config.smsBaseUrl === null
      ? new twilio.RequestClient({ timeout })
      : new ClientOf(config.smsBaseUrl, timeout);
  const client = twilio(config.smsAccountSid, config.smsAuthToken, { httpClient });
  return {
    async send({ to, body, statusUrl }) {
      try {
        const message = await client.messages.create({
          to,
          from: config.smsFrom,
          body,
          statusCallback: statusUrl,
        });
        return { outcome: 'accepted', providerId: message.sid };
      } catch (error) {
        return resultOf(error);
      }
    },
  };
}

const refusalSchema = z.object({ status: z.int(), code: z.number().optional() });
const networkSchema = z.object({ code: z.string(), cause: z.unknown().optional() });
const causeSchema = z.object({ syscall: z.string() });

/** Sorts what the SDK throws; exported for its table of cases. */
export function resultOf(error: unknown): SendResult {
  const refusal = refusalSchema.safeParse(error);
  if (refusal.success) return resultOfAnswer(refusal.data.status, refusal.data.code);
  const network = networkSchema.safeParse(error);
  if (!network.success) return { outcome: 'unsure', code: 'no-answer' };
  const { code, cause } = network.data;
  return isBeforeRequest(code, cause) ? { outcome: 'retry', code } : { outcome: 'unsure', code };
}

function resultOfAnswer(status: number, code: number | undefined): SendResult {
  // An answer that is not the provider's own came from something on the way; behind a 5xx the text may have gone.
  if (code === undefined) {
    if (status === 429 || status === 503) {
      return { outcome: 'retry', code: `http-${status}` };
    }
    if (status >= 500 || status < 400) {
      return { outcome: 'unsure', code: `http-${status}` };
    }
    return { outcome: 'retry', code: `http-${status}` };
  }
  if (status === 429 || status === 408 || status >= 500) {
    return { outcome: 'retry', code: String(code) };
  }
  // A wrong token or account is put right by whoever runs this, not by giving up on the message.
  if (status === 401 || status === 403) return { outcome: 'retry', code: String(code) };
  return { outcome: 'refused', code: String(code) };
}

/** Whether the network failed before anything of the request was sent: no address, no connection, no trust. */
function isBeforeRequest(code: string, cause: unknown): boolean {
  if (['ECONNREFUSED', 'ENOTFOUND', 'EAI_AGAIN', 'EHOSTUNREACH', 'ENETUNREACH'].includes(code)) return true;
  if (/CERT|SELF_SIGNED|UNABLE_TO_/.test(code)) return true;
  const attempts = cause instanceof AggregateError ? cause.errors : [cause];
  return attempts.every((attempt) => causeSchema.safeParse(attempt).data?.syscall === 'connect');
}
