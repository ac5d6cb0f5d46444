import { z } from 'zod';
import type { QuietHours } from './quiet-hours.ts';

/** Settings of sending and receiving, from the environment. */
export interface NoticesConfig {
  smsAccountSid: string;
  smsAuthToken: string;
  /** Number that texts come from, E.164. */
  smsFrom: string;
  /** Address of the SMS provider's API where it is not the provider's own; null: its own. */
  smsBaseUrl: string | null;
  smtpUrl: string;
  mailFrom: string;
  /** Public address of the web application, without a slash at the end: links and webhooks stand under it. */
  appOrigin: string;
  settleSeconds: number;
  /** null: texts go at any hour. */
  quietHours: QuietHours | null;
}

/** Variables of the environment that are missing or wrong; the message names each and what would be right. */
export class ConfigProblem extends Error {
  readonly variables: readonly string[];

  constructor(problems: readonly { variable: string; expected: string }[]) {
    const list = problems.map(({ variable, expected }) => `${variable} must be ${expected}`);
    super(`Notices cannot start: ${list.join('; ')}.`);
    this.name = 'ConfigProblem';
    this.variables = problems.map(({ variable }) => variable);
  }
}

const needed = (expected: string) => z.string({ error: expected }).min(1, expected);
const httpAddress = 'an http or https address such as https://board.example.com, with no path';
const isOrigin = (text: string) =>
  URL.canParse(text) && /^https?:$/.test(new URL(text).protocol) && /^\w+:\/\/[^/?#@]+\/?$/.test(text);
const clock = '([01]\\d|2[0-3]):([0-5]\\d)';
const quietHours = 'two different times such as 21:00-08:00, or off';

const environmentSchema = z.object({
  SMS_ACCOUNT_SID: needed("the SMS account's id, AC and 32 hexadecimal digits").regex(
    /^AC[0-9a-fA-F]{32}$/,
    "the SMS account's id, AC and 32 hexadecimal digits",
  ),
  SMS_AUTH_TOKEN: needed("the SMS account's secret token"),
  // ITU-T E.164: at most 15 digits, the first not 0.
  SMS_FROM: needed('a number such as +17205550100').regex(
    /^\+[1-9]\d{1,14}$/,
    'a number such as +17205550100',
  ),
  SMS_BASE_URL: z.string().refine(isOrigin, httpAddress).optional(),
  SMTP_URL: needed('an address such as smtp://mail.example.com:587').refine(
    (text) => /^smtps?:\/\/\S+$/.test(text) && URL.canParse(text) && new URL(text).hostname !== '',
    'an address such as smtp://mail.example.com:587',
  ),
  MAIL_FROM: needed('an address such as Strikeboard <board@example.com>').regex(
    /^(?:[^<>@\r\n]*<[^\s<>@]+@[^\s<>@]+>|[^\s<>@]+@[^\s<>@]+)$/,
    'an address such as Strikeboard <board@example.com>',
  ),
  APP_ORIGIN: needed(httpAddress).refine(isOrigin, httpAddress),
  SETTLE_SECONDS: z
    .string()
    .regex(/^\d{1,4}$/, 'a whole number of seconds, 0 to 3600')
    .transform(Number)
    .refine((seconds) => seconds <= 3600, 'a whole number of seconds, 0 to 3600')
    .default(120),
  QUIET_HOURS: z
    .string()
    .refine((text) => readQuietHours(text) !== undefined, quietHours)
    .default('off'),
});

/**
 * Reads the settings; variables that are not for notices are left alone, empty ones count as missing.
 * @throws ConfigProblem naming each bad variable; it repeats no value, for some are secrets
 */
export function readNoticesConfig(env: Readonly<Record<string, string | undefined>>): NoticesConfig {
  const filled = Object.fromEntries(Object.entries(env).filter(([, value]) => value !== ''));
  const result = environmentSchema.safeParse(filled);
  if (!result.success) {
    const byVariable = new Map(result.error.issues.map((issue) => [issue.path.join('.'), issue.message]));
    throw new ConfigProblem(Array.from(byVariable, ([variable, expected]) => ({ variable, expected })));
  }
  const { data } = result;
  return {
    smsAccountSid: data.SMS_ACCOUNT_SID,
    smsAuthToken: data.SMS_AUTH_TOKEN,
    smsFrom: data.SMS_FROM,
    smsBaseUrl: data.SMS_BASE_URL?.replace(/\/$/, '') ?? null,
    smtpUrl: data.SMTP_URL,
    mailFrom: data.MAIL_FROM,
    appOrigin: data.APP_ORIGIN.replace(/\/$/, ''),
    settleSeconds: data.SETTLE_SECONDS,
    quietHours: readQuietHours(data.QUIET_HOURS) ?? null,
  };
}

/** null: off; undefined: not readable. */
function readQuietHours(text: string): QuietHours | null | undefined {
  if (text === 'off') return null;
  const match = new RegExp(`^${clock}-${clock}$`).exec(text);
  if (match === null) return undefined;
  const [fromHour = 0, fromMinute = 0, untilHour = 0, untilMinute = 0] = match.slice(1).map(Number);
  const hours = { fromMin: fromHour * 60 + fromMinute, untilMin: untilHour * 60 + untilMinute };
  return hours.fromMin === hours.untilMin ? undefined : hours;
}
