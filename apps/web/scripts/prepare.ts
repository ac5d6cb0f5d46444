/**
 * Brings the database up to date and seeds the demo companies once. Prints a line for each demo account:
 * `account <email> <password> <who>`.
 */
import { openDatabase } from '@strikeboard/db/client';
import { migrate } from '@strikeboard/db/migrate';
import { z } from 'zod';
import { seedDemo } from './demo-seed.ts';

const environment = z
  .object({
    OWNER_DATABASE_URL: z.string().min(1),
    WEB_DATABASE_URL: z.string().min(1),
    /** An installation for real work wants no demo companies in it. */
    SEED_DEMO: z.enum(['yes', 'no']).default('yes'),
  })
  .safeParse(process.env);
if (!environment.success) {
  console.error(
    'Set OWNER_DATABASE_URL and WEB_DATABASE_URL (the addresses of the database as its owner and as the web role), and SEED_DEMO, if at all, to yes or no.',
  );
  process.exit(1);
}
const { OWNER_DATABASE_URL, WEB_DATABASE_URL, SEED_DEMO } = environment.data;

await migrate(OWNER_DATABASE_URL);
if (SEED_DEMO === 'no') process.exit(0);
const owner = openDatabase(OWNER_DATABASE_URL, { max: 2 });
const web = openDatabase(WEB_DATABASE_URL, { max: 2 });
try {
  for (const { email, password, who } of await seedDemo({ owner, web, nowMs: Date.now(), say: console.log }))
    console.log(`account ${email} ${password} ${who}`);
} finally {
  await owner.close();
  await web.close();
}
