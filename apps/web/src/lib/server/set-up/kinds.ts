import { crewsKind } from './crews.ts';
import { equipmentKind } from './equipment.ts';
import type { SetUpKind } from './form.ts';
import { mixesKind } from './mixes.ts';
import { peopleKind } from './people.ts';
import { plantsKind } from './plants.ts';
import { sitesKind } from './sites.ts';

/** Everything that a company sets up, by the last part of its page's address. */
export const setUpKinds: ReadonlyMap<string, SetUpKind> = new Map([
  ['people', peopleKind],
  ['crews', crewsKind],
  ['sites', sitesKind],
  ['plants', plantsKind],
  ['mixes', mixesKind],
  ['equipment', equipmentKind],
]);
