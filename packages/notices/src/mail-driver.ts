import { PassThrough } from 'node:stream';
import { createTransport } from 'nodemailer';
import { z } from 'zod';
import type { NoticesConfig } from './config.ts';
import type { SendResult } from './send-result.ts';

/** Hands e-mail to a mail server. */
export interface MailDriver {
  /**
   * Sends one e-mail. Never throws.
   * @param message.id becomes part of the Message-ID, so that mail programs fold a copy into one
   */
  send(message: { id: string; to: string; subject: string; text: string; html: string }): Promise<SendResult>;
}

const DEFAULT_TIMEOUT_MS = 20_000;

/** The mail server of `smtpUrl`. */
export function createMailDriver(
  config: Pick<NoticesConfig, 'smtpUrl' | 'mailFrom' | 'appOrigin'>,
  options: { timeoutMs?: number } = {},
): MailDriver {
  const url = withTimeouts(config.smtpUrl, options.timeoutMs ?? DEFAULT_TIMEOUT_MS);
  const { hostname } = new URL(config.appOrigin);
  return {
    async send({ id, to, subject, text, html }) {
      const transport = createTransport(url);
      // The message is opened for reading only once the server has greeted and, where asked, let us in; a connection
      // that breaks before has carried nothing of it.
      let isUnderWay = false;
      transport.use('stream', (mail, done) => {
        const through = new PassThrough();
        through.once('pipe', () => {
          isUnderWay = true;
        });
        mail.message.transform(through);
        done();
      });
      try {
        const info = await transport.sendMail({
          from: config.mailFrom,
          to,
          subject,
          text,
          html,
          messageId: `<${id}@${hostname}>`,
          // RFC 3834 section 5: keeps out-of-office answers from coming back.
          headers: { 'Auto-Submitted': 'auto-generated' },
          disableFileAccess: true,
          disableUrlAccess: true,
        });
        return { outcome: 'accepted', providerId: info.messageId };
      } catch (error) {
        return resultOf(error, isUnderWay);
      } finally {
        transport.close();
      }
    },
  };
}

/** The mailer takes no options beside an address, but reads them out of its query; those set there stay. */
function withTimeouts(smtpUrl: string, timeoutMs: number): string {
  const url = new URL(smtpUrl);
  for (const name of ['connectionTimeout', 'greetingTimeout', 'socketTimeout', 'dnsTimeout']) {
    if (!url.searchParams.has(name)) url.searchParams.set(name, String(timeoutMs));
  }
  return url.href;
}

const refusalSchema = z.object({ responseCode: z.int(), code: z.string().optional() });
const failureSchema = z.object({ code: z.string() });

/**
 * Sorts what the mailer throws; exported for its table of cases. Reply codes, RFC 5321 section 4.2.1: 4yz may be tried
 * again, 5yz may not.
 * @param isUnderWay whether the mailer had begun to hand over the message
 */
export function resultOf(error: unknown, isUnderWay: boolean): SendResult {
  const refusal = refusalSchema.safeParse(error);
  if (refusal.success) {
    const code = String(refusal.data.responseCode);
    // Being turned away at the door is put right by whoever runs this, not by giving up on the message.
    if (refusal.data.code === 'EAUTH' || !isUnderWay) return { outcome: 'retry', code };
    if (refusal.data.responseCode < 500) return { outcome: 'retry', code };
    return { outcome: 'refused', code };
  }
  const code = failureSchema.safeParse(error).data?.code ?? 'no-answer';
  if (code === 'EENVELOPE' || code === 'EMESSAGE') return { outcome: 'refused', code };
  if (!isUnderWay) return { outcome: 'retry', code };
  return { outcome: 'unsure', code };
}
