import { addDays, formatDay, instantAt, mondayOf, type SiteDay } from '@strikeboard/domain/zone';
import { BoardApi, todayAt } from './board-api.ts';
import { BoardPage } from './board-page.ts';
import { accounts, companies, expect, test } from './fixtures.ts';
import { phoneList, textsTo } from './inbox.ts';

// The servers' clock is Tokyo's, the browser's New York's, the sites' Denver's.
const { cedarFlat } = companies;
const SITE = 'Windrow warehouse';

/** A Monday so far ahead that no other test has put anything there, and nobody is told of what is. */
const quietMonday = (): SiteDay => addDays(mondayOf(todayAt(cedarFlat)), 35);

const at = (day: SiteDay, minute: number) => instantAt(day, minute, cedarFlat.zone);

test('a card is moved by the keyboard, with every step spoken', async ({ openAs, apiAs }) => {
  const api = new BoardApi(await apiAs(accounts.dispatcher), cedarFlat);
  const monday = quietMonday();
  const title = 'Keyboard forms';
  const visit = await api.addPrep(title, { site: SITE, wantedOn: monday });
  const crews = (await api.read(monday)).crews.toSorted((a, b) => a.sortOrder - b.sortOrder);
  const [last, beforeLast] = [crews.at(-1)?.name ?? '', crews.at(-2)?.name ?? ''];
  const stands = async () =>
    (await api.read(monday)).visits.find(({ id }) => id === visit.id) ?? { state: 'missing' };

  const board = new BoardPage(await openAs(accounts.dispatcher));
  await board.open(cedarFlat.slug, monday, 3);
  const label = `Prep, ${SITE}`;
  const waiting = board.card(board.waiting, label);
  await board.pickUp(waiting, `Picked up ${title}.`);
  await board.key('ArrowUp', `${last}, ${formatDay(monday, 'en')}, 6:00 AM: Fits.`);
  await board.key('ArrowRight', `${last}, ${formatDay(monday, 'en')}, 6:30 AM: Fits.`);
  await board.key('ArrowRight', '7:00 AM: Fits.');
  await board.key('ArrowLeft', '6:30 AM: Fits.');
  const tuesday = addDays(monday, 1);
  await board.key('PageDown', `${last}, ${formatDay(tuesday, 'en')}, 6:30 AM: Fits.`);
  await board.key('PageUp', `${last}, ${formatDay(monday, 'en')}, 6:30 AM: Fits.`);
  await board.key('PageDown', formatDay(tuesday, 'en'));
  await board.key('ArrowUp', `${beforeLast}, ${formatDay(tuesday, 'en')}, 6:30 AM: Fits.`);

  await test.step('escape leaves it where it was', async () => {
    await board.key('Escape', `${title} stays where it was.`);
    await expect(waiting).toBeVisible();
    expect(await stands()).toMatchObject({ state: 'waiting', version: visit.version });
  });

  await test.step('space puts it down', async () => {
    await board.pickUp(waiting, `Picked up ${title}.`);
    await board.key('ArrowUp', `${last}, ${formatDay(monday, 'en')}, 6:00 AM`);
    await board.key('ArrowUp', `${beforeLast}, ${formatDay(monday, 'en')}, 6:00 AM`);
    const done = `${title} stands with ${beforeLast}, ${formatDay(monday, 'en')}, 6:00 AM.`;
    await board.key('Space', done);
    await expect(board.toast(done)).toBeVisible();
    await expect(board.card(board.lane(beforeLast), label)).toHaveAccessibleName(
      /Pencilled, from 6:00 AM to 8:00 AM/,
    );
    expect(await stands()).toMatchObject({ state: 'pencilled', during: { startMs: at(monday, 360) } });
  });

  await test.step('undo puts it back', async () => {
    await board.page.getByRole('button', { name: 'Undo' }).first().click();
    await expect(board.spoken).toHaveText('Undone');
    await expect(waiting).toBeVisible();
    expect(await stands()).toMatchObject({ state: 'waiting', during: null });
  });
});

test('two dispatchers see each other, and a stale card is refused', async ({
  openAs,
  apiAs,
  allowOnConsole,
}) => {
  const api = new BoardApi(await apiAs(accounts.dispatcher), cedarFlat);
  const monday = addDays(quietMonday(), 7);
  const title = 'Shared forms';
  const visit = await api.addPrep(title, { site: SITE, wantedOn: monday });
  const [first, second] = (await api.read(monday)).crews.toSorted((a, b) => a.sortOrder - b.sortOrder);
  if (!first || !second) throw new Error('The demo has crews.');
  const label = `Prep, ${SITE}`;

  const danas = new BoardPage(await openAs(accounts.dispatcher));
  const marisols = new BoardPage(await openAs(accounts.secondDispatcher));
  await danas.open(cedarFlat.slug, monday, 3);
  await marisols.open(cedarFlat.slug, monday, 3);

  await test.step("one's move is at the other within a second", async () => {
    await danas.pickUp(danas.card(danas.waiting, label), `Picked up ${title}.`);
    await danas.carryUpTo(first.name, `${formatDay(monday, 'en')}, 6:00 AM`);
    const changed = danas.page.waitForResponse((answer) => answer.url().endsWith('/place'));
    await danas.page.keyboard.press('Space');
    await changed;
    await expect(marisols.card(marisols.lane(first.name), label)).toBeVisible();
    await expect(marisols.card(marisols.waiting, label)).toHaveCount(0);
  });

  await test.step('a move of a card that has changed meanwhile says what is different', async () => {
    // The other's board hears nothing more of changes.
    allowOnConsole(/ERR_FAILED|status of 409/);
    await marisols.page.route('**/api/cedar-flat/stream**', (route) => route.abort());
    await marisols.open(cedarFlat.slug, monday, 3, 'lost');
    const stale = marisols.card(marisols.lane(first.name), label);
    await expect(stale).toHaveAccessibleName(/from 6:00 AM/);

    const { version } = (await api.read(monday)).visits.find(({ id }) => id === visit.id) ?? visit;
    const tuesday = addDays(monday, 1);
    await api.place(visit.id, {
      ...{ crewId: second.id, crewStartMs: at(tuesday, 480), baseVersion: version },
    });
    await expect(stale).toBeVisible();

    await marisols.pickUp(stale, first.name);
    await marisols.key('ArrowRight', '6:30 AM');
    await marisols.page.keyboard.press('Space');
    const refusal = marisols.toast('Someone else has changed it since you loaded it.');
    await expect(refusal).toBeVisible();
    await expect(refusal).toContainText('Different now: crew, time.');
    // It stands where the first dispatcher's own change has put it.
    await expect(marisols.card(marisols.lane(second.name), label)).toHaveAccessibleName(/from 8:00 AM/);
    await expect(stale).toHaveCount(0);
    expect((await api.read(monday)).visits.find(({ id }) => id === visit.id)).toMatchObject({
      crewId: second.id,
      during: { startMs: at(tuesday, 480) },
    });
  });
});

test('nobody is told twice of what they know already', async ({ openAs, apiAs }) => {
  const api = new BoardApi(await apiAs(accounts.dispatcher), cedarFlat);
  // Within the seven days in which a drop is firm.
  const spot = await api.freeCrew({
    from: addDays(todayAt(cedarFlat), 2),
    days: 5,
    fits: ({ crewName }) => crewName in phoneList,
  });
  const told = phoneList[spot.crewName];
  if (!told) throw new Error(`Nobody of ${spot.crewName} is on the phone list.`);
  const { visit, pour } = await api.addPour('Once-told walk', { site: SITE, wantedOn: spot.day });
  const bodies = async () =>
    (await textsTo(told.phone)).map(({ body }) => body).filter((body) => body.includes(SITE));
  const before = (await bodies()).length;
  await api.place(visit.id, {
    ...{ crewId: spot.crewId, crewStartMs: at(spot.day, 480), baseVersion: visit.version },
  });
  await expect.poll(async () => (await bodies()).length).toBe(before + 1);

  const board = new BoardPage(await openAs(accounts.dispatcher));
  await board.open(cedarFlat.slug, spot.day);
  const card = board.card(board.lane(spot.crewName), 'Once-told walk');

  await test.step('a move and its undo end with what they were told first', async () => {
    const now = (await api.read(spot.day, 1)).visits.find(({ id }) => id === visit.id) ?? visit;
    const { revision } = await api.place(visit.id, {
      ...{ crewId: spot.crewId, crewStartMs: at(spot.day, 540), baseVersion: now.version },
    });
    await expect.poll(async () => (await bodies()).at(-1)).toContain('Start moved from 8:00 AM to 9:00 AM');
    expect((await api.post(`changes/${revision}/undo`)).status()).toBe(200);
    await expect.poll(async () => (await bodies()).at(-1)).toContain('Start moved from 9:00 AM to 8:00 AM');
    await expect(card).toHaveAccessibleName(/from 8:00 AM/);
  });

  await test.step('a change of nothing that was told sends nothing', async () => {
    const sent = (await bodies()).length;
    const settled = (await api.read(spot.day, 1)).pours.find(({ id }) => id === pour.id) ?? pour;
    const edit = await api.patch(`pours/${pour.id}`, {
      ...{ baseVersion: settled.version, notes: 'The owner is on holiday.' },
    });
    expect(edit.status(), await edit.text()).toBe(200);
    await expect(card).not.toHaveAccessibleName(/Not told/);
    const again: { due: boolean } = await (await api.post(`visits/${visit.id}/send-now`)).json();
    expect(again).toEqual({ due: false });
    // Long enough for a text that should not have been sent: the others took well under a second.
    await board.page.waitForTimeout(3_000);
    expect((await bodies()).length).toBe(sent);
  });
});

test('the panel edits a pour, and keeps what was typed wrong', async ({ openAs, apiAs, allowOnConsole }) => {
  allowOnConsole(/status of 422/);
  const api = new BoardApi(await apiAs(accounts.dispatcher), cedarFlat);
  const monday = quietMonday();
  const { pour } = await api.addPour('Edited walk', { site: SITE, wantedOn: monday });
  const yards = async () => (await api.read(monday)).pours.find(({ id }) => id === pour.id)?.orderedYd3;
  const board = new BoardPage(await openAs(accounts.dispatcher));
  await board.open(cedarFlat.slug, monday, 3);
  const card = board.card(board.waiting, 'Edited walk');
  await card.click();
  const panel = board.page.getByRole('complementary', { name: 'Edited walk' });
  await panel.getByRole('tab', { name: 'Edit' }).click();
  const field = panel.getByLabel('Ordered, yd³');
  const save = panel.getByRole('button', { name: 'Save' });

  await test.step('a number that is none', async () => {
    await field.fill('six and a bit');
    await save.click();
    await expect(field).toHaveAccessibleDescription(/"six and a bit" is not a number/);
    await expect(field).toHaveValue('six and a bit');
    expect(await yards()).toBe(5.25);
  });

  await test.step('a number that the server refuses', async () => {
    await field.fill('5000');
    await save.click();
    await expect(field).toHaveAccessibleDescription(/Expected a number, 0\.25 to 2000/);
    await expect(field).toHaveValue('5000');
    expect(await yards()).toBe(5.25);
  });

  await test.step('a number that is right', async () => {
    await field.fill('6.75');
    await save.click();
    await expect(board.toast('Saved.')).toBeVisible();
    await expect(card).toHaveAccessibleName(/6\.75 yd³/);
    expect(await yards()).toBe(6.75);
  });
});

test('without a connection a drop puts the card back and says so', async ({
  openAs,
  apiAs,
  allowOnConsole,
}) => {
  allowOnConsole(/ERR_INTERNET_DISCONNECTED/);
  const api = new BoardApi(await apiAs(accounts.dispatcher), cedarFlat);
  const monday = addDays(quietMonday(), 14);
  const title = 'Offline forms';
  const visit = await api.addPrep(title, { site: SITE, wantedOn: monday });
  const page = await openAs(accounts.dispatcher);
  const board = new BoardPage(page);
  await board.open(cedarFlat.slug, monday, 3);
  const waiting = board.card(board.waiting, `Prep, ${SITE}`);
  await page.context().setOffline(true);
  await board.pickUp(waiting, `Picked up ${title}.`);
  await board.key('ArrowUp', '6:00 AM: Fits.');
  await board.key('Space', `${title} stays where it was.`);
  await expect(board.toast('no connection. The card is back where it was.')).toBeVisible();
  await expect(waiting).toBeVisible();
  expect((await api.read(monday)).visits.find(({ id }) => id === visit.id)).toMatchObject({
    ...{ state: 'waiting', version: visit.version },
  });

  await page.context().setOffline(false);
  await board.pickUp(waiting, `Picked up ${title}.`);
  await board.key('ArrowUp', '6:00 AM: Fits.');
  await board.key('Space', `${title} stands with`);
  await expect(waiting).toHaveCount(0);
});
