import { expect, type Locator, type Page } from '@playwright/test';
import type { SiteDay } from '@strikeboard/domain/zone';
import { type Scale, xOfSlot } from '../../apps/web/src/components/board/scale.ts';

/** The board as a person sees and moves it. */
export class BoardPage {
  readonly page: Page;
  readonly waiting: Locator;
  /** What is read out to those who do not see the board. */
  readonly spoken: Locator;

  constructor(page: Page) {
    this.page = page;
    this.waiting = page.getByRole('region', { name: 'Waiting strip' });
    this.spoken = page.getByTestId('spoken');
  }

  /** Opens the board at some days and waits until it follows changes, or, with `lost`, knows that it does not. */
  async open(
    slug: string,
    from: SiteDay,
    days: 1 | 3 | 7 | 14 = 1,
    connection: 'live' | 'lost' = 'live',
  ): Promise<void> {
    await this.page.goto(`/${slug}/board?from=${from}&days=${days}`);
    const words = connection === 'live' ? 'Live' : /^Connection lost/;
    await expect(this.page.getByText(words, { exact: true })).toBeVisible();
    await expect(this.waiting).toBeVisible();
  }

  lane(crewName: string): Locator {
    return this.page.getByRole('region', { name: crewName, exact: true });
  }

  card(place: Locator, title: string): Locator {
    return place.getByRole('button', { name: title });
  }

  toast(text: string | RegExp): Locator {
    return this.page.getByRole('status').getByText(text);
  }

  /**
   * Drags a card by the mouse so that it would stand on a crew's lane from a minute of the day, and lets go when the
   * board says that it would.
   */
  async drag(
    card: Locator,
    to: { crewName: string; minute: number; said: string; scale: Omit<Scale, 'dayWidthPx'> },
  ) {
    const lane = this.lane(to.crewName).locator('[data-lane]');
    await lane.scrollIntoViewIfNeeded();
    await card.scrollIntoViewIfNeeded();
    const { mouse } = this.page;
    const from = await box(card);
    // The place is that of the card's upper left corner; it is held a little inside.
    const grip = { x: 12, y: 12 };
    await mouse.move(from.x + grip.x, from.y + grip.y);
    await mouse.down();
    await mouse.move(from.x + grip.x + 4, from.y + grip.y - 8, { steps: 4 });
    const area = await box(lane);
    const scale = { ...to.scale, dayWidthPx: area.width / to.scale.days };
    const x = area.x + xOfSlot({ day: scale.from, minute: to.minute }, scale) + 1;
    const y = area.y + area.height / 2 - Math.min(from.height, 76) / 2;
    await mouse.move(x + grip.x, y + grip.y, { steps: 8 });
    await expect(this.lane(to.crewName).getByText(to.said)).toBeVisible();
    await mouse.up();
  }

  /** Picks up the focused card by the keyboard. */
  async pickUp(card: Locator, title: string): Promise<void> {
    await card.focus();
    await this.page.keyboard.press('Space');
    await expect(this.spoken).toContainText(title);
  }

  /** Carries the held card from the waiting strip up to a crew's lane, and waits until what is read out says so. */
  async carryUpTo(crewName: string, said: string): Promise<void> {
    const lanes = await this.page
      .getByRole('region')
      .filter({ has: this.page.locator('[data-lane]') })
      .all();
    const names = await Promise.all(lanes.map((lane) => lane.getAttribute('aria-label')));
    const own = names.filter((name) => name !== 'Board: crews by days');
    for (const name of own.slice(own.indexOf(crewName)).toReversed())
      await this.key('ArrowUp', `${name}, ${name === crewName ? said : ''}`);
  }

  /** Presses a key while a card is held, and waits until what is read out says the given words. */
  async key(code: string, said: string | RegExp): Promise<void> {
    await this.page.keyboard.press(code);
    await expect(this.spoken).toContainText(said);
  }
}

async function box(locator: Locator) {
  const found = await locator.boundingBox();
  if (!found) throw new Error('It is not on the screen.');
  return found;
}
