import { expect, it } from 'vitest';
import { labelOf } from './finding-words.ts';

it("reads label and unit off a fact's key", () => {
  expect(labelOf('placingRateYd3PerHour')).toEqual({ label: 'placing rate', unit: 'yd³/h' });
  expect(labelOf('areaFt2')).toEqual({ label: 'area', unit: 'ft²' });
  expect(labelOf('concreteTempF')).toEqual({ label: 'concrete temp', unit: '°F' });
  expect(labelOf('windowHours')).toEqual({ label: 'window', unit: 'h' });
  expect(labelOf('people')).toEqual({ label: 'people', unit: '' });
});
