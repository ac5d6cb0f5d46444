import { addDays, formatDay, instantAt, siteDayOf, weekdayOf } from '@strikeboard/domain/zone';
import { BoardApi, json, one, type Problem, todayAt } from './board-api.ts';
import { BoardPage } from './board-page.ts';
import { accounts, companies, expect, test } from './fixtures.ts';

// The servers' clock is Tokyo's, the browser's New York's, the sites' Denver's and Chicago's.
const { cedarFlat, prairieLine } = companies;
const SUB = 'Rubén Carrasco';
/** Without hours of its own, so that only people decide. */
const SITE = 'Windrow warehouse';

const pages = ['board', 'notices', 'import', 'yard-sheet', 'set-up/people'];

test('a foreman sees the own crew, and moves nothing', async ({ openAs, apiAs, allowOnConsole }) => {
  allowOnConsole(/status of 403/);
  const api = new BoardApi(await apiAs(accounts.dispatcher), cedarFlat);
  const { day, crewId } = await api.freeCrew({
    from: addDays(todayAt(cedarFlat), 15),
    days: 14,
    fits: ({ crewName }) => crewName === 'North',
  });
  const visit = await api.addPrep('Foreman sees it', { site: SITE, wantedOn: day });
  const waits = await api.addPrep('Foreman does not', { site: SITE, wantedOn: day });
  const crewStartMs = instantAt(day, 420, cedarFlat.zone);
  await api.place(visit.id, { crewId, crewStartMs, baseVersion: visit.version });

  const page = await openAs(accounts.foreman);
  const board = new BoardPage(page);
  await board.open(cedarFlat.slug, day);
  const card = board.card(board.lane('North'), `Prep, ${SITE}`);
  await expect(card).toBeVisible();
  for (const crew of ['South', 'Big Slab']) await expect(board.lane(crew)).toHaveCount(0);
  await expect(board.card(board.waiting, SITE)).toHaveCount(0);
  await expect(page.getByRole('button', { name: 'New pour' })).toHaveCount(0);
  await expect(page.getByRole('navigation', { name: 'Pages' }).getByRole('link')).toHaveText(['Board']);

  await test.step('a drag takes nothing along', async () => {
    const box = await card.boundingBox();
    if (!box) throw new Error('The card is not on the screen.');
    await page.mouse.move(box.x + 10, box.y + 10);
    await page.mouse.down();
    await page.mouse.move(box.x + 210, box.y + 10, { steps: 8 });
    await page.mouse.up();
    await card.focus();
    await page.keyboard.press('Space');
    await page.keyboard.press('ArrowRight');
    await page.keyboard.press('Space');
    await expect(board.spoken).toBeEmpty();
    await expect(card).toHaveAccessibleName(/from 7:00 AM/);
  });

  await test.step('it opens, without what is for the office', async () => {
    await card.click();
    const panel = page.getByRole('complementary', { name: 'Prep: Foreman sees it' });
    await expect(panel.getByRole('tab', { name: 'People' })).toBeVisible();
    await expect(panel.getByRole('button', { name: /Call off|Back to waiting|Make firm/ })).toHaveCount(0);
  });

  await test.step('nor by the endpoints', async () => {
    const own = new BoardApi(await apiAs(accounts.foreman), cedarFlat);
    const seen = await own.read(day, 1);
    expect(seen.crews.map(({ name }) => name)).toEqual(['North']);
    expect(seen.visits.every((row) => row.crewId === crewId)).toBe(true);
    const place = { crewId, crewStartMs, baseVersion: visit.version };
    expect((await own.post(`visits/${visit.id}/place`, place)).status()).toBe(403);
    expect((await own.post(`visits/${waits.id}/call-off`, { baseVersion: 1, reason: 'No' })).status()).toBe(
      403,
    );
    for (const path of pages.slice(1)) {
      const answer = await page.goto(`/cedar-flat/${path}`);
      expect(answer?.status(), path).toBe(403);
      await expect(page.getByRole('heading', { name: 'Not for your role' })).toBeVisible();
    }
  });
});

test('a finisher has the own work and no board', async ({ openAs, apiAs, allowOnConsole }) => {
  allowOnConsole(/status of 403/);
  const page = await openAs(accounts.finisher);
  await page.goto('/');
  await expect(page).toHaveURL(/\/me$/);
  await expect(page.getByText('Beto Arriaga')).toBeVisible();
  for (const path of pages) expect((await page.goto(`/cedar-flat/${path}`))?.status(), path).toBe(403);
  const request = await apiAs(accounts.finisher);
  for (const path of ['board?from=2026-12-01', 'notices', 'yard-sheet', 'stream?since=0'])
    expect((await request.get(`/api/cedar-flat/${path}`)).status(), path).toBe(403);
});

test('a sub of two companies takes work of one, and the other learns only that the time is taken', async ({
  openAs,
  apiAs,
  allowOnConsole,
}) => {
  allowOnConsole(/status of 422/);
  const cedar = new BoardApi(await apiAs(accounts.dispatcher), cedarFlat);
  const prairie = new BoardApi(await apiAs(accounts.otherDispatcher), prairieLine);
  const from = addDays(todayAt(cedarFlat), 2);
  const theirs = await prairie.read(from, 7);
  const subAtPrairie = one(theirs.people, SUB).id;
  const crewAtPrairie = theirs.memberships.find(({ personId }) => personId === subAtPrairie)?.crewId;
  // Within the seven days in which a drop is firm, on a day on which both crews are free.

  const north = await cedar.freeCrew({
    ...{ from, days: 5 },
    fits: ({ crewName, day }) => crewName === 'North' && !isTaken(theirs, crewAtPrairie, day),
  });

  const { day } = north;
  const walk = await cedar.addPour('Taken walk', { site: SITE, wantedOn: day });
  const drive = await prairie.addPour('Overlapping drive', { site: 'Bluestem drive', wantedOn: day });
  // 8:00 in Denver is 9:00 in Chicago.
  const crewStartMs = instantAt(day, 480, cedarFlat.zone);
  await cedar.place(walk.visit.id, { crewId: north.crewId, crewStartMs, baseVersion: walk.visit.version });
  await prairie.place(drive.visit.id, {
    ...{ crewId: crewAtPrairie ?? '', crewStartMs, baseVersion: drive.visit.version },
  });

  const page = await openAs(accounts.sub, { viewport: { width: 390, height: 844 } });
  await page.goto('/me');
  await page.getByRole('link', { name: 'English' }).click();
  const entry = (company: string, site: string) =>
    page
      .getByRole('listitem')
      .filter({ hasText: company })
      .filter({ hasText: site })
      .filter({ has: page.getByText(/^\s*[89]:00 AM/) });
  const atCedar = entry('Cedar Flat Concrete', SITE);
  const atPrairie = entry('Prairie Line Flatwork', 'Bluestem drive');

  await test.step('both offers stand in the own work, each by its site’s clock', async () => {
    await expect(atCedar).toContainText('8:00 AM');
    await expect(atCedar).toContainText('This is an offer');
    await expect(atPrairie).toContainText('9:00 AM');
    await expect(atPrairie).toContainText('This is an offer');
  });

  await test.step('one is taken', async () => {
    await atCedar.getByRole('button', { name: 'Take it' }).click();
    await expect(page.getByRole('status')).toContainText('Your answer is kept');
    await expect(atCedar).toContainText('You said yes');
    const seen = await cedar.read(day, 1);
    const sub = one(seen.people, SUB).id;
    expect(
      seen.shifts.find(({ visitId, personId }) => visitId === walk.visit.id && personId === sub),
    ).toMatchObject({ state: 'held', answer: 'yes' });
  });

  await test.step('the other cannot be taken at the same time', async () => {
    await atPrairie.getByRole('button', { name: 'Take it' }).click();
    await expect(page.getByRole('alert')).toContainText('You are not free then');
    const text = await (await prairie.request.get(`/api/prairie-line/board?from=${day}&days=1`)).text();
    expect(JSON.parse(text).busy).toContainEqual(expect.objectContaining({ personId: subAtPrairie }));
    expect(text).not.toMatch(/Cedar Flat|Taken walk|Windrow/);
  });

  await test.step('a day marked off is not free at both, without a word of why', async () => {
    let off = addDays(day, 7);
    while (weekdayOf(off) > 5) off = addDays(off, 1);
    await page.getByLabel('First day').fill(off);
    await page.getByLabel('Last day').fill(off);
    await page.getByLabel('Note for yourself').fill('Court date, Greeley');
    await page.getByRole('button', { name: 'Save' }).click();
    await expect(page.getByRole('listitem').filter({ hasText: 'Court date, Greeley' })).toContainText(
      formatDay(off, 'en'),
    );

    for (const { api, crewId, site } of [
      { api: cedar, crewId: north.crewId, site: SITE },
      { api: prairie, crewId: crewAtPrairie ?? '', site: 'Bluestem drive' },
    ]) {
      const { zone, slug } = api.company;
      const visit = await api.addPrep('On the day off', { site, wantedOn: off });
      const text = await (await api.request.get(`/api/${slug}/board?from=${off}&days=1`)).text();
      expect(text).not.toContain('Court');
      const board: Awaited<ReturnType<BoardApi['read']>> = JSON.parse(text);
      const personId = one(board.people, SUB).id;
      const noonMs = instantAt(off, 720, zone);
      expect(
        board.busy.some(
          ({ during, ...row }) =>
            row.personId === personId && during.startMs <= noonMs && noonMs < during.endMs,
        ),
        slug,
      ).toBe(true);
      const refusal = await api.post(`visits/${visit.id}/place`, {
        ...{ crewId, crewStartMs: noonMs, baseVersion: visit.version },
      });
      const problem: Problem = await refusal.json();
      expect(problem).toMatchObject({ status: 422, code: 'reason-needed' });
      const finding = problem.findings?.find(({ code }) => code === 'person-overlap');
      expect(finding?.facts).toMatchObject({ takenBy: 'busy', leftOff: true });
      expect(JSON.stringify(problem)).not.toMatch(/Court|Greeley/);
    }

    const dispatcher = new BoardPage(await openAs(accounts.dispatcher));
    await dispatcher.open(cedarFlat.slug, off);
    const title = 'On the day off';
    await dispatcher.pickUp(dispatcher.card(dispatcher.waiting, `Prep, ${SITE}`), title);
    await dispatcher.carryUpTo('North', `${formatDay(off, 'en')}, 6:00 AM: Caution`);
    await dispatcher.page.keyboard.press('Space');
    const dialog = dispatcher.page.getByRole('dialog', { name: `${title}: accept with a reason` });
    await expect(dialog).toContainText(SUB);
    await expect(dialog).not.toContainText(/Court|Greeley|Prairie/);
  });
});

test('an owner reads the yard sheet as chart and as table', async ({ openAs, apiAs }) => {
  const sheet = await json<{
    weeks: { placed: { orderedYd3: string }; when: string }[];
    total: { orderedYd3: string };
    byCrew: { crewName: string; total: { orderedYd3: string } }[];
  }>(await (await apiAs(accounts.owner)).get('/api/cedar-flat/yard-sheet'));
  const page = await openAs(accounts.owner);
  await page.goto('/cedar-flat/board');
  await page.getByRole('link', { name: 'Yard sheet' }).click();
  await expect(page.getByRole('heading', { name: 'Yard sheet' })).toBeVisible();
  const table = page.getByRole('table', { name: 'Yards ordered by week and crew' });
  await expect(table.getByRole('row')).toHaveCount(sheet.weeks.length + 2);
  for (const { crewName } of sheet.byCrew)
    await expect(table.getByRole('columnheader', { name: crewName })).toBeVisible();
  const yards = (text: string) => Number(text.replaceAll(',', '') || '0');
  const cells = async (name: string | RegExp) =>
    (await table.getByRole('row', { name }).getByRole('cell').allTextContents()).map(yards);
  const all = await cells(/^All weeks/);
  const crews = sheet.byCrew.length;
  // The row of sums is the sum of its crews, to the plant's quarter yard.
  expect(all.slice(0, crews).reduce((sum, one) => sum + one, 0)).toBeCloseTo(all[crews] ?? -1, 6);
  expect(all[crews]).toBe(yards(sheet.total.orderedYd3));
  expect(all[crews]).toBeGreaterThan(0);
  const now = await cells(/this week/);
  expect(now[crews]).toBe(yards(sheet.weeks.find(({ when }) => when === 'current')?.placed.orderedYd3 ?? ''));

  // The chart repeats the table for those who see it, so it is hidden from those who hear the page.
  const chart = page.locator('.recharts-wrapper');
  await expect(chart.getByText('This week')).toBeVisible();
  for (const { crewName } of sheet.byCrew) await expect(chart.getByText(crewName)).toBeVisible();
  await expect(chart.locator('.recharts-bar-rectangle path').first()).toBeVisible();
});

test('a member of another company finds nothing', async ({ openAs, apiAs, allowOnConsole }) => {
  allowOnConsole(/status of 404/);
  const page = await openAs(accounts.otherDispatcher);
  for (const path of [...pages, '']) {
    const answer = await page.goto(`/cedar-flat/${path}`);
    expect(answer?.status(), path).toBe(404);
    await expect(page.getByRole('heading', { name: 'There is nothing here' })).toBeVisible();
  }
  await expect(page.getByText('Cedar Flat')).toHaveCount(0);
  const request = await apiAs(accounts.otherDispatcher);
  for (const path of ['board?from=2026-12-01', 'notices', 'yard-sheet', 'stream?since=0'])
    expect((await request.get(`/api/cedar-flat/${path}`)).status(), path).toBe(404);
  expect((await request.get('/api/prairie-line/board?from=2026-12-01')).status()).toBe(200);
});

test('nobody gets in without signing in, nor after signing out', async ({
  openAs,
  apiAs,
  signIn,
  allowOnConsole,
  playwright,
}) => {
  allowOnConsole(/status of 401/);
  const nobody = await apiAs(null);
  for (const path of ['/api/cedar-flat/board?from=2026-12-01', '/api/me/calendar?from=2026-12-01'])
    expect((await nobody.get(path)).status(), path).toBe(401);
  expect((await nobody.post('/api/cedar-flat/pours', { data: {} })).status()).toBe(401);

  const page = await openAs(null);
  await page.goto('/cedar-flat/notices');
  await expect(page).toHaveURL(/\/sign-in\?to=/);

  await test.step('a wrong password says so and keeps the address', async () => {
    await page.getByLabel('E-mail').fill(accounts.owner);
    await page.getByLabel('Password').fill('pour-at-last-light');
    await page.getByRole('button', { name: 'Sign in' }).click();
    await expect(page.getByRole('alert')).toContainText('do not belong together');
    await expect(page.getByLabel('E-mail')).toHaveValue(accounts.owner);
  });

  await signIn(page, accounts.owner);
  const storageState = await page.context().storageState();
  const kept = await playwright.request.newContext({
    baseURL: new URL(page.url()).origin,
    storageState,
  });
  const path = `/api/cedar-flat/board?from=${siteDayOf(Date.now(), cedarFlat.zone)}`;
  expect((await kept.get(path)).status()).toBe(200);
  await page.getByRole('button', { name: 'Sign out' }).click();
  await expect(page).toHaveURL(/sign-in/);
  expect((await kept.get(path)).status(), 'the session that was signed out').toBe(401);
  await kept.dispose();
  await page.goto('/cedar-flat/board');
  await expect(page).toHaveURL(/\/sign-in\?to=/);
});

function isTaken(
  board: Awaited<ReturnType<BoardApi['read']>>,
  crewId: string | undefined,
  day: string,
): boolean {
  return board.visits.some(
    (visit) =>
      visit.crewId === crewId &&
      visit.during !== null &&
      visit.state !== 'called-off' &&
      siteDayOf(visit.during.startMs, board.zone) === day,
  );
}
