import { describe, expect, it } from 'vitest';
import { sendAtMs } from './quiet-hours.ts';
import { at } from './testing.ts';

const quietHours = { fromMin: 21 * 60, untilMin: 8 * 60 };
const zone = 'America/Denver';

describe('when a text may go', () => {
  // Not before 8:00 and not after 21:00 at the called party's place: 47 CFR 64.1200(c)(1) (published); held to
  // [8:00, 21:00), the stricter reading.
  it.each([
    ['2026-12-06', '07:59', '2026-12-06', '8:00'],
    ['2026-12-06', '08:00', '2026-12-06', '8:00'],
    ['2026-12-06', '20:59', '2026-12-06', '20:59'],
    ['2026-12-06', '21:00', '2026-12-07', '8:00'],
    ['2026-12-06', '00:00', '2026-12-06', '8:00'],
    // Clocks go forward at 2:00 on 2026-03-08 and back on 2026-11-01 (IANA tz database): 8:00 is 8:00 all the same.
    ['2026-03-07', '22:00', '2026-03-08', '8:00'],
    ['2026-10-31', '22:00', '2026-11-01', '8:00'],
  ])('%s %s', (day, clock, sendDay, sendClock) => {
    const sent = sendAtMs({ nowMs: at(day, clock), zone, quietHours, startMs: null });
    expect(sent).toBe(at(sendDay, sendClock));
  });

  it('holds hours that end on the day they began', () => {
    const noon = { fromMin: 12 * 60, untilMin: 13 * 60 };
    const nowMs = at('2026-12-06', '12:30');
    expect(sendAtMs({ nowMs, zone, quietHours: noon, startMs: null })).toBe(at('2026-12-06', '13:00'));
  });

  it('goes at once when held back it would come less than three hours before the start', () => {
    const nowMs = at('2026-12-06', '22:00');
    const input = { nowMs, zone, quietHours };
    expect(sendAtMs({ ...input, startMs: at('2026-12-07', '11:00') })).toBe(at('2026-12-07', '8:00'));
    expect(sendAtMs({ ...input, startMs: at('2026-12-07', '10:59') })).toBe(nowMs);
  });

  it('goes at any hour when there are none', () => {
    const nowMs = at('2026-12-06', '22:00');
    expect(sendAtMs({ nowMs, zone, quietHours: null, startMs: null })).toBe(nowMs);
  });
});
