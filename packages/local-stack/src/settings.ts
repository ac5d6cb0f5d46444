import { z } from 'zod';
import { parsePort, StackError } from './bootstrap.mjs';
import type { Secrets } from './secrets.ts';

/** The number the fake SMS provider sends from: one of those kept for fiction. */
export const FAKE_SMS_FROM = '+17205550100';

const environmentSchema = z.object({
  APP_ORIGIN: z.url('an address such as https://board.example.com').optional(),
  AUTH_SECRET: z.string().min(32, 'at least 32 characters').optional(),
  SMS_ACCOUNT_SID: z.string().optional(),
  SMS_AUTH_TOKEN: z.string().optional(),
  SMS_FROM: z
    .string()
    .regex(/^\+[1-9]\d{1,14}$/, 'a number such as +17205550100')
    .optional(),
  SMTP_URL: z
    .string()
    .regex(/^smtps?:\/\/\S+$/, 'an address such as smtp://mail.example.com:587')
    .optional(),
  SETTLE_SECONDS: z.string().regex(/^\d+$/, 'a whole number of seconds, such as 120').optional(),
});

/** What the person who starts the stack has chosen. */
export type Settings = z.infer<typeof environmentSchema> & { port: number; hasOwnSms: boolean };

/** @throws StackError naming each variable that is wrong and what would be right */
export function readSettings(env: NodeJS.ProcessEnv): Settings {
  const filled = Object.fromEntries(Object.entries(env).filter(([, value]) => value !== ''));
  const result = environmentSchema.safeParse(filled);
  if (!result.success) {
    const problems = result.error.issues.map(({ path, message }) => `${path.join('.')} must be ${message}`);
    throw new StackError(`${problems.join('; ')}.`);
  }
  const own = (['SMS_ACCOUNT_SID', 'SMS_AUTH_TOKEN', 'SMS_FROM'] as const).filter(
    (name) => result.data[name],
  );
  if (own.length > 0 && own.length < 3) {
    throw new StackError(
      `Set SMS_ACCOUNT_SID, SMS_AUTH_TOKEN and SMS_FROM together to use an SMS provider of your own, or none of them; only ${own.join(' and ')} is set.`,
    );
  }
  return { ...result.data, port: parsePort(env.PORT), hasOwnSms: own.length === 3 };
}

/** The environment of web server and worker, but for their database: the same names as in any installation. */
export function serviceEnvironment(options: {
  env: NodeJS.ProcessEnv;
  settings: Settings;
  secrets: Secrets;
  port: number;
  settleSeconds: number | undefined;
  inboxUrl: string;
  smtpUrl: string;
}): NodeJS.ProcessEnv {
  const { env, settings, secrets, port, settleSeconds, inboxUrl, smtpUrl } = options;
  // A database named in the environment is someone else's: the stack has its own.
  const { DATABASE_URL, OWNER_DATABASE_URL, WEB_DATABASE_URL, ...rest } = env;
  const fakeSms = {
    SMS_ACCOUNT_SID: secrets.smsAccountSid,
    SMS_AUTH_TOKEN: secrets.smsAuthToken,
    SMS_FROM: FAKE_SMS_FROM,
    SMS_BASE_URL: inboxUrl,
  };
  return {
    ...rest,
    ...(settings.hasOwnSms ? {} : fakeSms),
    APP_ORIGIN: settings.APP_ORIGIN ?? `http://127.0.0.1:${port}`,
    AUTH_SECRET: settings.AUTH_SECRET ?? secrets.authSecret,
    SMTP_URL: settings.SMTP_URL ?? smtpUrl,
    MAIL_FROM: env.MAIL_FROM || 'Strikeboard <board@example.com>',
    SETTLE_SECONDS: String(settleSeconds ?? settings.SETTLE_SECONDS ?? 120),
    LOG_LEVEL: env.LOG_LEVEL || 'info',
    HOST: '127.0.0.1',
    PORT: String(port),
    ASTRO_TELEMETRY_DISABLED: '1',
  };
}
