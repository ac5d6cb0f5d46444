/** The image and the compose file cannot be run here, so they are held against what `npm start` runs. */

import { readFileSync } from 'node:fs';
import path from 'node:path';
import { ROLES } from '@strikeboard/local-stack/app-database';
import { serviceEnvironment } from '@strikeboard/local-stack/settings';
import { usualPrograms } from '@strikeboard/local-stack/stack';
import { describe, expect, it } from 'vitest';
import { parse } from 'yaml';

const root = path.resolve(import.meta.dirname, '../..');
const read = (file: string) => readFileSync(path.join(root, file), 'utf8');

interface Service {
  image: string;
  command?: string[];
  environment: Record<string, string>;
}
const compose: { services: Record<'database' | 'prepare' | 'web' | 'worker', Service> } = parse(
  read('docker/compose.yaml'),
  { merge: true },
);
const dockerfile = read('docker/Dockerfile');
const { services } = compose;

/** What `npm start` gives to web server and worker, without what only its fakes or this machine need. */
function usualNames(): string[] {
  const names = Object.keys(
    serviceEnvironment({
      env: {},
      settings: { port: 4321, hasOwnSms: false },
      secrets: {
        superuserPassword: '',
        ownerPassword: '',
        webPassword: '',
        workerPassword: '',
        authSecret: 's',
        smsAccountSid: 'AC0',
        smsAuthToken: 't',
      },
      port: 4321,
      settleSeconds: undefined,
      inboxUrl: 'http://127.0.0.1:1',
      smtpUrl: 'smtp://127.0.0.1:1',
    }),
  );
  return names.filter((name) => name !== 'SMS_BASE_URL' && name !== 'ASTRO_TELEMETRY_DISABLED');
}

describe('the image and its compose file', () => {
  const usual = usualPrograms('/app', 'built', 4321);

  for (const part of ['prepare', 'web', 'worker'] as const) {
    it(`runs the ${part} as npm start does`, () => {
      const script = usual[part].at(-1);
      expect(script).toMatch(/^\/app\//);
      expect(services[part].command).toEqual([
        'node',
        '--import',
        'tsx',
        path.relative('/app', String(script)),
      ]);
      expect(read(path.relative('/app', String(script))).length).toBeGreaterThan(0);
    });
  }

  it('builds as npm start does, and serves by default', () => {
    expect(dockerfile).toContain(
      `cd apps/web && ${path.relative('/app/apps/web', String(usual.build[0]))} ${usual.build.slice(1).join(' ')}`,
    );
    expect(JSON.parse(/^CMD (.*)$/m.exec(dockerfile)?.[1] ?? '')).toEqual(services.web.command);
  });

  it('names every variable that npm start sets, and the database each role may use', () => {
    const onlyWeb = ['HOST', 'PORT'];
    const given = (part: 'web' | 'worker') => Object.keys(services[part].environment);
    expect(given('web')).toEqual(expect.arrayContaining([...usualNames(), 'DATABASE_URL']));
    expect(given('worker')).toEqual(
      expect.arrayContaining([...usualNames().filter((name) => !onlyWeb.includes(name)), 'DATABASE_URL']),
    );
    expect(services.web.environment.DATABASE_URL).toContain(`//${ROLES.web}:`);
    expect(services.worker.environment.DATABASE_URL).toContain(`//${ROLES.worker}:`);
    expect(services.prepare.environment.OWNER_DATABASE_URL).toContain(`//${ROLES.owner}:`);
    expect(services.prepare.environment.WEB_DATABASE_URL).toContain(`//${ROLES.web}:`);
  });

  it('listens on the port it exposes', () => {
    expect(services.web.environment.PORT).toBe('4321');
    expect(dockerfile).toMatch(/^EXPOSE 4321$/m);
    expect(read('packages/local-stack/src/bootstrap.mjs')).toContain('4321');
  });

  it('makes the same roles, none of which may pass row-level security', () => {
    const made = [...read('docker/roles.sh').matchAll(/^create role (\w+) .*nosuperuser.*nobypassrls/gm)].map(
      ([, name]) => name,
    );
    expect(made.sort()).toEqual([...Object.values(ROLES), 'app_cross'].sort());
  });

  it('takes the same major versions of Node and PostgreSQL', () => {
    expect(dockerfile).toMatch(/^FROM node:20-/m);
    expect(JSON.parse(read('package.json')).engines.node).toMatch(/^>=20/);
    expect(services.database.image).toBe('postgres:15');
    expect(read('packages/local-stack/src/postgres-programs.ts')).toMatch(/\b15\b/);
  });
});
