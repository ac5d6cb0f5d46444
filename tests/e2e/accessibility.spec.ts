import AxeBuilder from '@axe-core/playwright';
import type { Page } from '@playwright/test';
import { addDays, instantAt } from '@strikeboard/domain/zone';
import { BoardApi, todayAt } from './board-api.ts';
import { BoardPage } from './board-page.ts';
import { accounts, companies, expect, test } from './fixtures.ts';
import { textsTo } from './inbox.ts';

// Rules are those of axe-core 4.13, which name the success criteria of WCAG 2.2 behind each.
const { cedarFlat } = companies;
const themes = ['light', 'dark', 'sunlight'] as const;
const wide = { width: 1440, height: 900 };
const phone = { width: 390, height: 844 };

/** The rules that look at colours; no other can come out differently in another theme. */
const colourRules = ['color-contrast', 'link-in-text-block'];

/** Every violation as one line, so that a failure says all of them at once; within a part of the page, or in all. */
async function violationsOf(page: Page, rules: 'all' | 'colours', within?: string): Promise<string[]> {
  const builder = new AxeBuilder({ page });
  if (within) builder.include(within);
  if (rules === 'colours') builder.withRules(colourRules);
  const { violations } = await builder.analyze();
  return violations.flatMap(({ id, nodes }) =>
    nodes.map(
      ({ target, failureSummary }) => `${id} ${target.join(' ')}: ${failureSummary?.split('\n').at(-1)}`,
    ),
  );
}

/** Opens a page and looks it over in each theme. */
async function lookOver(
  page: Page,
  name: string,
  open: () => Promise<void>,
  { within, by = themes }: { within?: string; by?: readonly (typeof themes)[number][] } = {},
): Promise<void> {
  await open();
  for (const theme of by) {
    await test.step(`${name}, ${theme}`, async () => {
      await wear(page, theme);
      const rules = theme === by[0] ? 'all' : 'colours';
      expect(await violationsOf(page, rules, within), `${name}, ${theme}`).toEqual([]);
    });
  }
  const overflow = await page.evaluate(
    () => document.documentElement.scrollWidth - document.documentElement.clientWidth,
  );
  expect(overflow, `${name}: pixels past the right edge`).toBeLessThanOrEqual(0);
}

/** Sets the theme as the switch on the page does, and waits until colours have stopped changing. */
async function wear(page: Page, theme: string): Promise<void> {
  await page.evaluate(async (chosen) => {
    document.documentElement.dataset.theme = chosen;
    const changing = document.getAnimations().filter((one) => one instanceof CSSTransition);
    await Promise.allSettled(changing.map(({ finished }) => finished));
  }, theme);
}

const heading = (page: Page, name: string | RegExp) =>
  expect(page.getByRole('heading', { name, level: 1 })).toBeVisible();

test('a theme is chosen once, and comes with every page after that', async ({ page }) => {
  const shown = page.locator('html');
  for (const [theme, label] of [
    ['light', 'Light'],
    ['dark', 'Dark'],
    ['sunlight', 'Sunlight'],
  ] as const) {
    await page.goto('/sign-in');
    await page.getByLabel('Colours').selectOption(label);
    await expect(shown).toHaveAttribute('data-theme', theme);
    await page.reload();
    await expect(shown).toHaveAttribute('data-theme', theme);
    await expect(page.getByLabel('Colours')).toHaveValue(theme);
  }
  await page.getByLabel('Colours').selectOption('As the device');
  await page.reload();
  await expect(shown).not.toHaveAttribute('data-theme');
});

test('signing in', async ({ page, allowOnConsole }) => {
  allowOnConsole(/status of 401/);
  for (const size of [wide, phone]) {
    await page.setViewportSize(size);
    await lookOver(page, `sign-in at ${size.width}`, async () => {
      await page.goto('/sign-in');
      await heading(page, 'Sign in');
    });
    await lookOver(page, `sign-in refused at ${size.width}`, async () => {
      await page.goto('/sign-in');
      await page.getByLabel('E-mail').fill('nobody@example.com');
      await page.getByLabel('Password').fill('pour-at-last-light');
      await page.getByRole('button', { name: 'Sign in' }).click();
      await expect(page.getByRole('alert')).toBeVisible();
    });
  }
});

test('the board, its panel and its dialogs', async ({ openAs, apiAs }) => {
  test.setTimeout(300_000);
  const api = new BoardApi(await apiAs(accounts.dispatcher), cedarFlat);
  const today = todayAt(cedarFlat);
  const { day, crewId } = await api.freeCrew({ from: addDays(today, 15), days: 14 });
  const { visit } = await api.addPour('Looked-over walk', { site: 'Larkbunting residence', wantedOn: day });
  await api.place(visit.id, {
    ...{ crewId, crewStartMs: instantAt(day, 390, cedarFlat.zone), baseVersion: visit.version },
  });
  const page = await openAs(accounts.dispatcher, { viewport: wide });
  const board = new BoardPage(page);
  await lookOver(page, 'board, a week', () => board.open(cedarFlat.slug, today, 7));
  await lookOver(page, 'board, a day', () => board.open(cedarFlat.slug, day, 1));
  const openPanel = async (tab: string) => {
    await board.open(cedarFlat.slug, day, 1);
    await page.getByRole('button', { name: 'Looked-over walk' }).click();
    await page.getByRole('tab', { name: tab }).click();
    await expect(page.getByRole('tabpanel', { name: tab })).toBeVisible();
  };
  for (const tab of ['Plan', 'Edit', 'People', 'History'])
    await lookOver(page, `panel, ${tab}`, () => openPanel(tab), { within: 'aside' });
  await lookOver(
    page,
    'a new pour',
    async () => {
      await board.open(cedarFlat.slug, day, 1);
      await page.getByRole('button', { name: 'New pour' }).click();
      await expect(page.getByRole('dialog')).toBeVisible();
    },
    { within: 'dialog' },
  );
  await page.setViewportSize(phone);
  await lookOver(page, 'board on a phone', () => board.open(cedarFlat.slug, day, 1));
  await lookOver(page, 'panel on a phone', () => openPanel('Plan'));
});

test('import, notices and yard sheet', async ({ openAs }) => {
  test.setTimeout(300_000);
  const page = await openAs(accounts.owner, { viewport: wide });
  await lookOver(page, 'import', async () => {
    await page.goto('/cedar-flat/import');
    await expect(page.getByRole('radio', { name: /Waiting pours/ })).toBeVisible();
  });
  const sheet = 'Job name;Yds;Finish\nLarkbunting residence;a few;Broom\nTamarisk lot 16;7;Broom\n';
  const lookAtImport = async () => {
    await page.goto('/cedar-flat/import');
    await page.getByRole('radio', { name: /Waiting pours/ }).check();
    await page
      .getByLabel('Choose a CSV or XLSX file')
      .setInputFiles({ name: 'few.csv', mimeType: 'text/csv', buffer: Buffer.from(sheet) });
    await expect(page.getByRole('region', { name: 'To look at' })).toBeVisible();
  };
  await lookOver(page, 'import, looked at', lookAtImport);
  await lookOver(page, 'notices', async () => {
    await page.goto('/cedar-flat/notices');
    await expect(page.getByRole('listitem').filter({ hasText: 'Text to' }).first()).toBeVisible();
  });
  await lookOver(page, 'yard sheet', async () => {
    await page.goto('/cedar-flat/yard-sheet');
    await expect(page.locator('.recharts-wrapper').getByText('This week')).toBeVisible();
  });
  await page.setViewportSize(phone);
  await lookOver(page, 'import on a phone, looked at', lookAtImport);
  for (const path of ['import', 'notices', 'yard-sheet'])
    await lookOver(page, `${path} on a phone`, async () => {
      await page.goto(`/cedar-flat/${path}`);
      await heading(page, /\S/);
      await page.waitForLoadState('networkidle');
    });
});

test('set-up', async ({ openAs }) => {
  test.setTimeout(300_000);
  const page = await openAs(accounts.owner, { viewport: wide });
  // One page draws all kinds: its looks are held in every theme for one of them, its fields for all.
  for (const kind of ['people', 'crews', 'sites', 'plants', 'mixes', 'equipment']) {
    const by = kind === 'people' ? themes : (['light'] as const);
    const list = async () => {
      await page.goto(`/cedar-flat/set-up/${kind}`);
      await heading(page, /\S/);
    };
    const form = async () => {
      await page.goto(`/cedar-flat/set-up/${kind}?add`);
      await expect(page.getByRole('button', { name: 'Save' })).toBeVisible();
    };
    await lookOver(page, kind, list, { by });
    await lookOver(page, `${kind}, one more`, form, { by });
  }
  await page.setViewportSize(phone);
  await lookOver(page, 'people on a phone', async () => {
    await page.goto('/cedar-flat/set-up/people?add');
    await expect(page.getByRole('button', { name: 'Save' })).toBeVisible();
  });
});

test('the own work, and pages that say no', async ({ openAs, allowOnConsole }) => {
  allowOnConsole(/status of 40[34]/);
  const page = await openAs(accounts.sub, { viewport: phone });
  for (const size of [phone, wide]) {
    await page.setViewportSize(size);
    await lookOver(page, `own work at ${size.width}`, async () => {
      await page.goto('/me?language=en');
      await heading(page, 'My work');
    });
  }
  await lookOver(page, 'own work in Spanish', async () => {
    await page.goto('/me?language=es');
    await expect(page.locator('html')).toHaveAttribute('lang', 'es');
  });
  await lookOver(page, 'not allowed', async () => {
    await page.goto('/cedar-flat/board');
    await heading(page, 'Not for your role');
  });
  await lookOver(page, 'not found', async () => {
    await page.goto('/no-such-company/board');
    await heading(page, 'There is nothing here');
  });
});

test('the link page, down to the smallest phone', async ({ openAs, allowOnConsole }) => {
  allowOnConsole(/status of 404/);
  // The demo's board is firm in the week that is worked, so its people have been told.
  const links = (await textsTo(null))
    .map(({ body }) => /\/l\/[A-Za-z0-9_-]{43}/.exec(body)?.[0])
    .filter((link) => link !== undefined);
  expect(links.length, 'texts with a link').toBeGreaterThan(0);
  const page = await openAs(null, { viewport: phone });
  const open = async () => {
    await page.goto(links.at(-1) ?? '');
    await heading(page, /\S/);
  };
  await lookOver(page, 'link page', open);
  await page.setViewportSize({ width: 320, height: 640 });
  await lookOver(page, 'link page at 320', open);
  const buttons = await page.getByRole('button').all();
  expect(buttons.length).toBeGreaterThan(0);
  // Larger than WCAG 2.2's 2.5.5 (44 px) asks: gloves. Common practice, no source.
  for (const button of [...buttons, page.getByRole('link', { name: /Open map|Abrir/ })])
    expect((await button.boundingBox())?.height).toBeGreaterThanOrEqual(48);
  await lookOver(page, 'a link that opens nothing', async () => {
    await page.goto(`/l/${'x'.repeat(43)}`);
    await heading(page, /\S/);
  });
});
