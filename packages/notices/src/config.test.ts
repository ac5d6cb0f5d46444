import { describe, expect, it } from 'vitest';
import { ConfigProblem, readNoticesConfig } from './config.ts';

// Forms of the values: common practice, no source, but for numbers (ITU-T E.164, published).
const good = {
  SMS_ACCOUNT_SID: `AC${'0'.repeat(32)}`,
  SMS_AUTH_TOKEN: 'a-secret-token',
  SMS_FROM: '+17205550100',
  SMTP_URL: 'smtp://127.0.0.1:2525',
  MAIL_FROM: 'Strikeboard <board@example.com>',
  APP_ORIGIN: 'https://board.example.com/',
};

function problemOf(env: Record<string, string | undefined>): ConfigProblem {
  try {
    readNoticesConfig(env);
  } catch (error) {
    if (error instanceof ConfigProblem) return error;
    throw error;
  }
  throw new Error('it was accepted');
}

describe('the settings', () => {
  it('are read, with what is left out filled in', () => {
    expect(readNoticesConfig({ ...good, PATH: '/bin', SMS_BASE_URL: '', QUIET_HOURS: undefined })).toEqual({
      smsAccountSid: good.SMS_ACCOUNT_SID,
      smsAuthToken: 'a-secret-token',
      smsFrom: '+17205550100',
      smsBaseUrl: null,
      smtpUrl: 'smtp://127.0.0.1:2525',
      mailFrom: 'Strikeboard <board@example.com>',
      appOrigin: 'https://board.example.com',
      settleSeconds: 120,
      quietHours: null,
    });
  });

  it('can be set otherwise', () => {
    const set = { SMS_BASE_URL: 'http://127.0.0.1:9999/', SETTLE_SECONDS: '0', QUIET_HOURS: '21:00-08:00' };
    expect(readNoticesConfig({ ...good, ...set })).toMatchObject({
      smsBaseUrl: 'http://127.0.0.1:9999',
      settleSeconds: 0,
      quietHours: { fromMin: 1260, untilMin: 480 },
    });
  });

  it.each([
    ['SMS_ACCOUNT_SID', 'XX123'],
    ['SMS_AUTH_TOKEN', ''],
    ['SMS_FROM', '720 555 0100'],
    ['SMS_FROM', '+0205550100'],
    ['SMS_BASE_URL', 'ftp://127.0.0.1'],
    ['SMS_BASE_URL', 'http://127.0.0.1/path'],
    ['SMTP_URL', 'http://mail.example.com'],
    ['SMTP_URL', 'smtp://'],
    ['MAIL_FROM', 'nobody'],
    ['MAIL_FROM', 'A <a@example.com>\nBcc: x@example.com'],
    ['APP_ORIGIN', 'board.example.com'],
    ['APP_ORIGIN', 'https://board.example.com/app'],
    ['APP_ORIGIN', undefined],
    ['SETTLE_SECONDS', '-1'],
    ['SETTLE_SECONDS', '2 min'],
    ['SETTLE_SECONDS', '3601'],
    ['QUIET_HOURS', '9pm-8am'],
    ['QUIET_HOURS', '08:00-08:00'],
  ])('are refused for %s = %s', (variable, value) => {
    expect(problemOf({ ...good, [variable]: value }).variables).toEqual([variable]);
  });

  it('name all that is wrong in one message, and repeat no value', () => {
    const problem = problemOf({ ...good, SMS_AUTH_TOKEN: undefined, SMTP_URL: 'hunter2', SMS_FROM: '12' });
    expect(problem.message).toBe(
      "Notices cannot start: SMS_AUTH_TOKEN must be the SMS account's secret token; SMS_FROM must be a number such as +17205550100; SMTP_URL must be an address such as smtp://mail.example.com:587.",
    );
  });
});
