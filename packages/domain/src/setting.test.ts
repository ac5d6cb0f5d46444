import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { rateFactor } from './cure.ts';
import { InputProblem } from './problem.ts';
import { setTimesH, tabulatedSetH, temperatureFactor, windowOfFinishabilityH } from './setting.ts';
import { fToC } from './units.ts';

const tempF = fc.double({ min: 32, max: 118, noNaN: true });

describe('temperature rule (published: trade article citing ACI 305R-10 and ACI 306R-16)', () => {
  it.each([
    [50, 12],
    [60, 8.49],
    [70, 6],
    [80, 4.24],
    [90, 3],
    [100, 2.12],
  ])('6 h at 70 F is, at %d F, %d h (arithmetic)', (concreteTempF, hours) => {
    expect(6 * temperatureFactor(concreteTempF)).toBeCloseTo(hours, 2);
    expect(setTimesH({ concreteTempF }).finalSetH).toBeCloseTo(hours, 2);
  });

  it('20 F more halves and 20 F less doubles', () => {
    fc.assert(
      fc.property(fc.double({ min: 40, max: 100, noNaN: true }), (at) => {
        expect(temperatureFactor(at) / temperatureFactor(at + 20)).toBeCloseTo(2, 9);
      }),
    );
  });

  it('stays within 5 percent of Arrhenius (ASTM C1074, Q 5,000 K) from 50 to 68 F and 20 percent up to 90 F', () => {
    const ratio = (at: number) =>
      temperatureFactor(at) / temperatureFactor(68) / (rateFactor(20) / rateFactor(fToC(at)));
    for (let at = 50; at <= 68; at += 2) expect(Math.abs(ratio(at) - 1)).toBeLessThan(0.05);
    for (let at = 70; at <= 90; at += 2) expect(Math.abs(ratio(at) - 1)).toBeLessThan(0.2);
  });
});

describe('set-time table (ACI/PCA lineage, from memory)', () => {
  const rows: [concreteTempF: number, hours: number][] = [
    [100, 5 / 3],
    [90, 8 / 3],
    [80, 4],
    [70, 6],
    [60, 8],
    [50, 11],
    [40, 14],
    [30, 19],
  ];
  it.each(rows)('%d F', (concreteTempF, hours) => {
    expect(tabulatedSetH(concreteTempF)).toBeCloseTo(hours, 9);
    // The formula that checks use is never quicker than the table and at most 30 percent slower.
    const formula = setTimesH({ concreteTempF }).finalSetH / hours;
    expect(formula).toBeGreaterThan(0.999);
    expect(formula).toBeLessThan(1.3);
  });
  it('reads between its rows', () => {
    expect(tabulatedSetH(75)).toBeCloseTo(5, 9);
    expect(tabulatedSetH(35)).toBeCloseTo(16.5, 9);
  });
  it('has no set at 20 F', () => {
    expect(() => setTimesH({ concreteTempF: 20 })).toThrow(/does not set/);
    expect(() => tabulatedSetH(20)).toThrow(InputProblem);
  });
  it('final set at 80 F is about 4 h and at 90 F about 2.5 h (published: general Q&A page)', () => {
    expect(Math.abs(setTimesH({ concreteTempF: 80 }).finalSetH - 4)).toBeLessThan(0.5);
    expect(Math.abs(setTimesH({ concreteTempF: 90 }).finalSetH - 2.5)).toBeLessThanOrEqual(0.5);
  });
});

describe('window of finishability (ends: ACI 302.1R; 2.0 h at 70 F: common practice, no source)', () => {
  it.each([
    [50, 4],
    [70, 2],
    [90, 1],
  ])('%d F: %d h (arithmetic)', (concreteTempF, hours) => {
    expect(windowOfFinishabilityH(concreteTempF)).toBeCloseTo(hours, 9);
  });
  it('hotter is never longer and never later', () => {
    fc.assert(
      fc.property(tempF, tempF, (one, other) => {
        const [cool, hot] = one < other ? [one, other] : [other, one];
        expect(windowOfFinishabilityH(hot)).toBeLessThanOrEqual(windowOfFinishabilityH(cool));
        expect(setTimesH({ concreteTempF: hot }).initialSetH).toBeLessThanOrEqual(
          setTimesH({ concreteTempF: cool }).initialSetH,
        );
      }),
    );
  });
});

describe('setTimesH', () => {
  const input = fc.record({
    concreteTempF: tempF,
    cement: fc.constantFrom('type-i' as const, 'type-ii' as const, 'type-iii' as const),
    retarderH: fc.double({ min: 0, max: 8, noNaN: true }),
    acceleratorH: fc.double({ min: 0, max: 3.5, noNaN: true }),
    vapourRetarder: fc.boolean(),
  });

  it('keeps its order for every mix: bleeding ends by the initial set, which is before the final (ASTM C403)', () => {
    fc.assert(
      fc.property(input, (mix) => {
        const times = setTimesH(mix);
        expect(times.bleedEndH).toBeGreaterThan(0);
        expect(times.bleedEndH).toBeLessThanOrEqual(times.initialSetH);
        expect(times.initialSetH).toBeLessThan(times.finalSetH);
        expect(times.finalSetH - times.initialSetH).toBeLessThanOrEqual(
          windowOfFinishabilityH(mix.concreteTempF) + 1e-9,
        );
      }),
    );
  });
  it('without cement, admixture and sheet the window is exactly the plain one', () => {
    const times = setTimesH({ concreteTempF: 83 });
    expect(times.finalSetH - times.initialSetH).toBeCloseTo(windowOfFinishabilityH(83), 9);
  });
  it('a retarder moves both sets alike; its hours are as at 70 F (ASTM C494 type B)', () => {
    const plain = setTimesH({ concreteTempF: 70 });
    const late = setTimesH({ concreteTempF: 70, retarderH: 1.5 });
    expect(late.initialSetH - plain.initialSetH).toBeCloseTo(1.5, 9);
    expect(late.finalSetH - plain.finalSetH).toBeCloseTo(1.5, 9);
  });
  it('an accelerator and Type III bring the window forward and narrow it (common practice, no source)', () => {
    const width = (times: { initialSetH: number; finalSetH: number }) => times.finalSetH - times.initialSetH;
    const plain = setTimesH({ concreteTempF: 70 });
    const quicker = [
      setTimesH({ concreteTempF: 70, acceleratorH: 1 }),
      setTimesH({ concreteTempF: 70, cement: 'type-iii' }),
    ];
    for (const quick of quicker) {
      expect(quick).toMatchObject({ initialSetH: 3, finalSetH: 4.5 });
      expect(width(quick)).toBeLessThan(width(plain));
    }
  });
  it('bleeding lasts longer over a sheet (ACI 302.1R; common practice, no source)', () => {
    const bare = setTimesH({ concreteTempF: 70 });
    const sheet = setTimesH({ concreteTempF: 70, vapourRetarder: true });
    expect(sheet.bleedEndH).toBeGreaterThan(bare.bleedEndH);
    expect(sheet.initialSetH).toBe(bare.initialSetH);
  });
  it.each([
    ['no temperature', { concreteTempF: Number.NaN }, 'concreteTempF'],
    ['hotter than concrete gets', { concreteTempF: 121 }, 'concreteTempF'],
    ['Celsius', { concreteTempF: 20 }, 'concreteTempF'],
    ['negative retarder', { concreteTempF: 70, retarderH: -1 }, 'retarderH'],
    ['accelerator beyond its class', { concreteTempF: 70, acceleratorH: 4 }, 'acceleratorH'],
  ])('refuses %s', (_name, bad, field) => {
    expect(() => setTimesH(bad)).toThrow(expect.objectContaining({ name: 'InputProblem', field }));
  });
});
