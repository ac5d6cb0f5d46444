/** The demo: two companies whose own spreadsheets go through the same import as anyone's. */

import { readFile } from 'node:fs/promises';
import path from 'node:path';
import { type Database, inCompany } from '@strikeboard/db/client';
import { Conflict } from '@strikeboard/db/errors';
import { acceptImport, saveImport } from '@strikeboard/db/queries/imports';
import { createCompany } from '@strikeboard/db/queries/set-up';
import { personForSignIn, setPassword } from '@strikeboard/db/queries/sign-in';
import type { CompanyRules } from '@strikeboard/domain/company-rules';
import type { IntakeKind } from '@strikeboard/domain/intake/fields';
import { roles } from '@strikeboard/domain/vocabulary';
import { addDays, daysBetween, mondayOf, type SiteDay, siteDayOf } from '@strikeboard/domain/zone';
import { z } from 'zod';
import { hashPassword } from '../src/lib/server/password.ts';
import { previewImport } from '../src/lib/sheets/preview-import.ts';
import { readSheet } from '../src/lib/sheets/read-sheet.ts';
import { fillBoard } from './demo-board.ts';
import { addSupply } from './demo-supply.ts';

const demoFolder = path.join(import.meta.dirname, '../demo');
/** One password for all demo accounts, printed at every start. The demo holds nobody's data. */
const DEMO_PASSWORD = 'pour-at-first-light';

/** What the companies have set: where their yard is, and their own experience with power trowels. */
const demoRules: Readonly<Record<string, Partial<CompanyRules>>> = {
  'cedar-flat': {
    yardLatDeg: 40.4103,
    yardLonDeg: -105.0462,
    workRatesPersonHoursPerFt2: { broom: 0.008, float: 0.008, trowel: 0.0075, 'hard-trowel': 0.0055 },
  },
  'prairie-line': { yardLatDeg: 37.7021, yardLonDeg: -97.3488 },
};
const CREWS_SINCE_MS = 100 * 24 * 3_600_000;

const kinds = ['people', 'crews', 'sites', 'pours'] as const satisfies readonly IntakeKind[];
const sheetFile = z.string().min(1);
const demoSchema = z.object({
  baseDay: z.string(),
  companies: z.array(
    z.object({
      slug: z.string(),
      name: z.string(),
      zone: z.string(),
      files: z.object({ people: sheetFile, crews: sheetFile, sites: sheetFile, pours: sheetFile }),
    }),
  ),
  accounts: z.array(
    z.object({ email: z.email(), role: z.enum(roles), companies: z.array(z.string()).min(1) }),
  ),
});
type DemoCompany = z.infer<typeof demoSchema>['companies'][number];

export interface DemoAccount {
  email: string;
  password: string;
  who: string;
}

/** Seeds what is missing and returns the accounts. A company that is there is left as it is. */
export async function seedDemo(of: {
  owner: Database;
  web: Database;
  nowMs: number;
  say: (line: string) => void;
}): Promise<DemoAccount[]> {
  const { owner, web, nowMs, say } = of;
  const demo = demoSchema.parse(JSON.parse(await readFile(path.join(demoFolder, 'accounts.json'), 'utf8')));
  const accounts = demo.accounts.map(({ email, role, companies }) => ({
    email,
    password: DEMO_PASSWORD,
    who: `${role} of ${companies.map((slug) => demo.companies.find((company) => company.slug === slug)?.name ?? slug).join(' and ')}`,
  }));
  if (await isSeeded(web, demo)) return accounts;

  for (const company of demo.companies) {
    const boss = demo.accounts.find(
      ({ role, companies }) => role === 'owner' && companies[0] === company.slug,
    );
    if (!boss) throw new Error(`The demo company ${company.slug} has no owner.`);
    const made = await makeCompany(owner, company, boss.email);
    if (made === null) continue;
    say(`Seeding ${company.name}`);
    const at = { companyId: made.companyId, actorId: made.ownerId, nowMs, zone: company.zone };
    // The sheets' days count from a Monday; they move by whole weeks into the one that is being worked.
    const shiftDays = daysBetween(demo.baseDay, workedMonday(siteDayOf(nowMs, company.zone)));
    for (const kind of kinds) {
      if (kind === 'pours')
        await inCompany(web, { companyId: at.companyId, personId: at.actorId }, (tx) =>
          addSupply(tx, company),
        );
      // The crews have worked together since before the weeks that the yard sheet looks back on.
      const knownMs = kind === 'people' || kind === 'crews' ? nowMs - CREWS_SINCE_MS : nowMs;
      await bringIn(web, {
        ...at,
        nowMs: knownMs,
        kind,
        file: company.files[kind],
        referenceDay: demo.baseDay,
        shiftDays,
      });
    }
    await fillBoard(web, at);
  }
  // Last, so that a start that was broken off is seen as unfinished.
  const passwordHash = await hashPassword(DEMO_PASSWORD);
  for (const { email } of demo.accounts) {
    const person = await personForSignIn(web, email);
    if (!person) throw new Error(`The demo account ${email} is in none of the sheets.`);
    await setPassword(web, person.personId, passwordHash);
  }
  return accounts;
}

/** The current week's Monday; from Saturday on the coming one, since that is the week people then plan. */
function workedMonday(today: SiteDay): SiteDay {
  return mondayOf(addDays(today, 2));
}

async function isSeeded(web: Database, demo: z.infer<typeof demoSchema>): Promise<boolean> {
  for (const { email } of demo.accounts) {
    const person = await personForSignIn(web, email);
    if (!person?.passwordHash) return false;
  }
  return true;
}

async function makeCompany(owner: Database, company: DemoCompany, email: string) {
  const name = email
    .slice(0, email.indexOf('@'))
    .split('.')
    .map((part) => part.charAt(0).toUpperCase() + part.slice(1))
    .join(' ');
  try {
    return await createCompany(owner, {
      ...company,
      rules: demoRules[company.slug] ?? {},
      owner: { name, email, phoneE164: null, language: 'en' },
    });
  } catch (error) {
    if (error instanceof Conflict && error.code === 'slug-taken') return null;
    throw error;
  }
}

async function bringIn<K extends IntakeKind>(
  web: Database,
  of: {
    kind: K;
    file: string;
    companyId: string;
    actorId: string;
    nowMs: number;
    zone: string;
    referenceDay: SiteDay;
    shiftDays: number;
  },
): Promise<void> {
  const { kind, file, companyId, actorId, nowMs, zone, referenceDay } = of;
  const bytes = await readFile(path.join(demoFolder, file));
  const fileName = path.basename(file);
  const preview = await previewImport({
    bytes,
    fileName,
    kind,
    options: { referenceDay, zone, country: 'US' },
  });
  const { sheets } = await readSheet(bytes, fileName);
  const wrong = preview.problems.filter(({ severity }) => severity === 'error');
  if (wrong.length > 0)
    throw new Error(`${file}, line ${wrong[0]?.line}: ${wrong[0]?.field} cannot be read.`);
  const records = preview.records.map((record) =>
    'wantedOn' in record && record.wantedOn !== null
      ? { ...record, wantedOn: addDays(record.wantedOn, of.shiftDays) }
      : record,
  );
  await inCompany(web, { companyId, personId: actorId }, async (tx) => {
    const importId = await saveImport(tx, {
      kind,
      fileName,
      sheetName: preview.sheetName,
      encoding: preview.encoding,
      rows: sheets.find(({ name }) => name === preview.sheetName)?.table ?? [],
      mapping: preview.mapping,
      actorId,
      nowMs,
    });
    await acceptImport(tx, {
      importId,
      baseVersion: 1,
      batch: { kind, records } as Parameters<typeof acceptImport>[1]['batch'],
      actorId,
      nowMs,
    });
  });
}
