import { addDays, formatClock, formatDay, instantAt, type SiteDay } from '@strikeboard/domain/zone';
import { BoardApi, codesAt, todayAt } from './board-api.ts';
import { BoardPage } from './board-page.ts';
import { accounts, companies, expect, fromStack, test } from './fixtures.ts';
import { mailsTo, phoneList, textsTo } from './inbox.ts';

// The servers' clock is Tokyo's, the browser's New York's, the site's Denver's.
const { cedarFlat } = companies;
const SITE = 'Larkbunting residence';
const ADDRESS = '1410 Larkbunting Dr';
const POUR = 'Peña patio';
/** The site's hours are 7:00 to 18:00, and a crew sets up for 45 minutes before the first truck (demo data). */
const CREW_START_MIN = { stop: 5 * 60 + 30, caution: 6 * 60 + 30 };

/** Bytes of Windows-1252 where it differs from Latin-1 (WHATWG Encoding Standard, index windows-1252). */
const windows1252 = new Map([
  ['”', 0x94],
  ['’', 0x92],
]);
const encoded = (text: string) =>
  Buffer.from([...text].map((letter) => windows1252.get(letter) ?? letter.charCodeAt(0)));

/** A dispatcher's own sheet: a title, a blank line, semicolons, feet and inches, a row twice, a total. */
function sheet(wantedOn: SiteDay, secondYards: string): Buffer {
  const pour = `${SITE};${POUR};${wantedOn};11½;4”;22' x 40';Broom;off the truck;4500 air;Side gate`;
  const rows = [
    'Extra work;;;;;;;;;',
    '',
    'Job name;Slab;Wanted;Yds;Thk;Size;Finish;Placing;Mix;Notes',
    pour,
    ';;;;;;;;;',
    `Tamarisk lot 16;Shed slab;${wantedOn};${secondYards};4";12' x 16';Broom;chute;4500 air;`,
    pour,
    'Total;;;14;;;;;;',
  ];
  return encoded(`${rows.join('\r\n')}\r\n`);
}

test('from a messy spreadsheet to a yes on the board', async ({ page, signIn, openAs, apiAs }) => {
  test.setTimeout(120_000);
  const api = new BoardApi(await apiAs(accounts.dispatcher), cedarFlat);
  // Within the seven days in which a drop is firm.
  const { day, crewId, crewName } = await api.freeCrew({
    from: addDays(todayAt(cedarFlat), 2),
    days: 5,
    fits: (spot) => spot.crewName in phoneList,
  });

  await test.step('sign in', async () => {
    await signIn(page, accounts.dispatcher);
    await expect(page).toHaveURL(/\/cedar-flat\/board/);
  });

  const choose = async (name: string, buffer: Buffer) => {
    await page.goto('/cedar-flat/import');
    await page.getByRole('radio', { name: /Waiting pours/ }).check();
    await page.getByLabel('Choose a CSV or XLSX file').setInputFiles({ name, mimeType: 'text/csv', buffer });
    await expect(page.getByRole('heading', { name })).toBeVisible();
  };
  const forecast = page.getByRole('region', { name: 'What will happen' });

  await test.step('a cell that cannot be read is named by line and column, with what would be right', async () => {
    await choose('extra-work.csv', sheet(day, 'a few'));
    await expect(forecast).toContainText('1 pour will be added');
    await expect(forecast).toContainText('1 cell keeps its row out');
    const problems = page.getByRole('region', { name: 'To look at' });
    const row = problems.getByRole('row').filter({ hasText: 'a few' });
    // The sixth line of the file as spreadsheet programs count, the fourth column.
    await expect(row.getByRole('cell').nth(0)).toContainText('6');
    await expect(row.getByRole('cell').nth(1)).toHaveText('D');
    await expect(row.getByRole('cell').nth(4)).toContainText('Expected yards of concrete, such as 32');
    await problems.getByText('3 rows were skipped').click();
    await expect(problems.getByText('Line 5:')).toContainText('Blank row');
    await expect(problems.getByText('Line 7:')).toContainText('Same as a row above');
    await expect(problems.getByText('Line 8:')).toContainText('Row of totals');
    await page.getByRole('button', { name: 'Put aside' }).click();
    await expect(page.getByRole('radio', { name: /Waiting pours/ })).toBeVisible();
  });

  await test.step('the corrected file is accepted', async () => {
    await choose('extra-work.csv', sheet(day, '2½'));
    await expect(forecast).toContainText('2 pours will be added');
    const read = page
      .getByRole('region', { name: 'As it was read' })
      .getByRole('row')
      .filter({ hasText: POUR });
    await expect(read).toContainText('11.5');
    await page.getByRole('button', { name: 'Accept all' }).click();
    await expect(page.getByRole('heading', { name: '2 pours added' })).toBeVisible();
  });

  await test.step('the same file once more adds nothing', async () => {
    const before = await api.read(day, 1);
    await choose('extra-work again.csv', sheet(day, '2½'));
    await expect(forecast).toContainText('0 pours will be added, 2 are here already');
    await page.getByRole('button', { name: 'Accept all' }).click();
    await expect(page.getByRole('heading', { name: '0 pours added' })).toBeVisible();
    await expect(page.getByText('2 here already, left as they are.')).toBeVisible();
    const after = await api.read(day, 1);
    expect(after.visits.length).toBe(before.visits.length);
  });

  const snapshot = await api.read(day, 1);
  const pour = snapshot.pours.find(({ name }) => name === POUR);
  const visit = snapshot.visits.find(({ pourId }) => pourId === pour?.id);
  if (!pour || !visit) throw new Error('The imported pour is not on the board.');
  expect(pour).toMatchObject({ orderedYd3: 11.5, thicknessIn: 4, areaFt2: 880, placingMethod: 'chute' });
  expect(visit).toMatchObject({ state: 'waiting', wantedOn: day });
  const startMs = (minute: number) => instantAt(day, minute, cedarFlat.zone);
  const said = (minute: number) =>
    `${formatDay(day, 'en')}, ${formatClock(startMs(minute), cedarFlat.zone, 'en')}`;
  const { rules } = snapshot;
  const scale = {
    ...{ from: day, days: 1, stepMin: 15 },
    ...{ dayFromMin: rules.dayFromMin, dayUntilMin: rules.dayUntilMin },
  };

  const board = new BoardPage(page);
  await board.open(cedarFlat.slug, day);
  const waiting = board.card(board.waiting, POUR);
  const placed = board.card(board.lane(crewName), POUR);

  await test.step('a drop on a stop says why, offers what fits, and moves nothing', async () => {
    const at = CREW_START_MIN.stop;
    await board.drag(waiting, { crewName, minute: at, said: `${said(at)} · Stop`, scale });
    const dialog = page.getByRole('dialog', { name: `${POUR} can't stand there` });
    await expect(dialog).toContainText('Outside the site’s hours');
    await expect(dialog).toContainText('permitted is 7:00 AM to 6:00 PM');
    const offers = dialog.getByRole('list').last().getByRole('button');
    await expect(offers.first()).toContainText(formatDay(day, 'en').slice(0, 3));
    await expect(offers.first()).toContainText(/fits|with a caution/);
    await dialog.getByRole('button', { name: 'Cancel' }).click();
    await expect(dialog).toBeHidden();
    await expect(waiting).toBeVisible();
    await expect(placed).toHaveCount(0);
    expect((await api.read(day, 1)).visits.find(({ id }) => id === visit.id)).toMatchObject({
      state: 'waiting',
      version: visit.version,
    });
  });

  const droppedAt = Date.now();
  await test.step('a drop on a caution asks for a reason, and takes none that is empty', async () => {
    const at = CREW_START_MIN.caution;
    expect(codesAt(snapshot, { visitId: visit.id, crewId, crewStartMs: startMs(at) })).toMatchObject({
      stop: [],
      caution: expect.arrayContaining(['site-hours']),
    });
    await board.drag(waiting, { crewName, minute: at, said: `${said(at)} · Caution`, scale });
    const dialog = page.getByRole('dialog', { name: `${POUR}: accept with a reason` });
    await expect(dialog).toContainText('The crew is there outside the hours');
    await dialog.getByRole('button', { name: 'Put it there' }).click();
    await expect(dialog).toContainText('Write a reason');
    await expect(placed).toHaveCount(0);
    await dialog.getByLabel('Why is this all right?').fill('The neighbours know and agree.');
    await dialog.getByRole('button', { name: 'Put it there' }).click();
    await expect(board.toast(`${POUR} stands with ${crewName}, ${said(at)}.`)).toBeVisible();
    await expect(placed).toBeVisible();
    await expect(waiting).toHaveCount(0);
  });

  const told = phoneList[crewName];
  if (!told) throw new Error(`Nobody of ${crewName} is on the phone list.`);
  const since = <T>(list: T[], when: (row: T) => string) =>
    list.filter((row) => Date.parse(when(row)) >= droppedAt - 1_000);

  const link = await test.step('a crew member gets a text and an e-mail', async () => {
    await expect
      .poll(async () => since(await textsTo(told.phone), ({ createdAt }) => createdAt).length)
      .toBe(1);
    const [text] = since(await textsTo(told.phone), ({ createdAt }) => createdAt);
    expect(text?.to).toBe(told.phone);
    expect(text?.body).toContain('Cedar Flat Concrete');
    expect(text?.body).toContain(ADDRESS);
    // Crew's start, and the first truck when it has set up for the rule's 45 minutes, by the site's clock.
    expect(text?.body).toContain('Be there 6:30 AM, first truck 7:15 AM');
    expect(text?.body).toMatch(/11\.5 yd/);
    expect(text?.body).toContain('broom');
    const found = /https?:\/\/\S+\/l\/[A-Za-z0-9_-]{43}/.exec(text?.body ?? '')?.[0] ?? '';
    expect(found).toContain(`${fromStack('E2E_WEB_URL')}/l/`);

    await expect
      .poll(async () => since(await mailsTo(told.email), ({ receivedAt }) => receivedAt).length)
      .toBe(1);
    const [mail] = since(await mailsTo(told.email), ({ receivedAt }) => receivedAt);
    expect(mail?.subject).toContain('6:30 AM');
    expect(mail?.text).toContain(ADDRESS);
    expect(mail?.text).toContain('First truck: 7:15 AM');
    expect(mail?.text).toContain('/l/');
    expect(mail?.html).toContain('/l/');
    return found;
  });

  await test.step('the link opens without signing in and takes a yes', async () => {
    const phone = await openAs(null, { viewport: { width: 390, height: 844 } });
    await phone.goto(link);
    await expect(phone.getByText('Be there at 6:30 AM')).toBeVisible();
    await expect(phone.getByText('First truck at 7:15 AM')).toBeVisible();
    await expect(phone.getByText(ADDRESS)).toBeVisible();
    const map = phone.getByRole('link', { name: 'Open map' });
    expect(decodeURIComponent((await map.getAttribute('href')) ?? '')).toContain(ADDRESS);
    await expect(phone.getByText(told.name)).toBeVisible();
    await expect(phone.getByRole('heading', { name: 'What to bring' })).toBeVisible();
    await expect(phone.getByRole('listitem').filter({ hasText: 'Rubber boots' })).toBeVisible();
    await expect(phone.getByRole('heading', { name: 'Watch out' })).toBeVisible();
    await expect(phone.getByText('The crew is there outside the hours')).toBeVisible();
    await phone.getByRole('button', { name: 'Yes, I will be there' }).click();
    await expect(phone.getByRole('status')).toContainText('You said yes');
  });

  await test.step('the board shows the answer without a reload', async () => {
    await expect(placed).toHaveAccessibleName(/, 1 of \d+ said yes/);
  });

  await test.step('the notices list the words as they were sent', async () => {
    await page.getByRole('link', { name: 'Notices' }).click();
    const notices = page.getByRole('listitem').filter({ hasText: told.name }).filter({ hasText: POUR });
    await expect(notices).toHaveCount(2);
    const text = notices.filter({ hasText: 'Text to' });
    await expect(text).toContainText('Be there 6:30 AM, first truck 7:15 AM');
    await expect(text).toContainText('[their own link]');
    await expect(text).toContainText('Delivered');
    await expect(notices.filter({ hasText: 'E-mail to' })).toContainText('First truck: 7:15 AM');
  });
});
