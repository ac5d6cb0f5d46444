import { instantAt } from '@strikeboard/domain/zone';
import { describe, expect, it } from 'vitest';
import {
  instantOfSlot,
  minuteAtShare,
  type Scale,
  shareOfDay,
  slotAt,
  slotInstants,
  stepSlot,
  xOf,
  xOfSlot,
} from './scale.ts';

// Office in Denver, site in Chicago, and the machine's own zone is neither.
const scale: Scale = {
  from: '2026-03-02',
  days: 7,
  dayWidthPx: 200,
  dayFromMin: 240,
  dayUntilMin: 1200,
  stepMin: 30,
};
const site = 'America/Chicago';

describe("the board's scale", () => {
  it('maps every minute of the day there and back', () => {
    for (let minute = 0; minute < 1440; minute += 7)
      expect(minuteAtShare(shareOfDay(minute, scale), scale)).toBeCloseTo(minute, 6);
  });

  it('keeps night hours in sight and in order', () => {
    expect(shareOfDay(0, scale)).toBe(0);
    expect(shareOfDay(1440, scale)).toBeCloseTo(1, 12);
    expect(shareOfDay(120, scale)).toBeGreaterThan(0);
    expect(shareOfDay(1320, scale)).toBeLessThan(1);
  });

  it("stands a card at the site's clock, not at the office's", () => {
    const sixThirty = instantAt('2026-03-04', 390, site);
    expect(xOf(sixThirty, site, scale)).toBeCloseTo(xOfSlot({ day: '2026-03-04', minute: 390 }, scale), 6);
    expect(slotAt(xOf(sixThirty, site, scale), scale)).toEqual({ day: '2026-03-04', minute: 390 });
  });

  it('carries a night pour over midnight into the next column', () => {
    const start = xOf(instantAt('2026-03-04', 1320, site), site, scale);
    const end = xOf(instantAt('2026-03-05', 360, site), site, scale);
    expect(start).toBeLessThan(600);
    expect(end).toBeGreaterThan(600);
  });

  it("drops by the site's wall clock across the change of clocks (2026-03-08)", () => {
    const slot = { day: '2026-03-08', minute: 420 };
    // 7:00 CDT is 12:00Z; the day before 7:00 CST was 13:00Z.
    expect(new Date(instantOfSlot(slot, site)).toISOString()).toBe('2026-03-08T12:00:00.000Z');
    expect(new Date(instantOfSlot({ ...slot, day: '2026-03-07' }, site)).toISOString()).toBe(
      '2026-03-07T13:00:00.000Z',
    );
  });

  it('steps over midnight and stays on the board', () => {
    expect(stepSlot({ day: '2026-03-04', minute: 1410 }, 1, scale)).toEqual({ day: '2026-03-05', minute: 0 });
    expect(stepSlot({ day: '2026-03-02', minute: 0 }, -3, scale)).toEqual({ day: '2026-03-02', minute: 0 });
    expect(stepSlot({ day: '2026-03-08', minute: 1410 }, 5, scale)).toEqual({
      day: '2026-03-08',
      minute: 1410,
    });
  });

  it('lists every slot once', () => {
    expect(slotInstants(scale, 'America/Phoenix')).toHaveLength(7 * 48);
  });
});
