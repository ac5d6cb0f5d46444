import type { Tx } from '@strikeboard/db/client';
import {
  createEquipment,
  createMix,
  createPlant,
  type EquipmentFields,
  type MixFields,
} from '@strikeboard/db/queries/set-up-supply';

const weekdays = { fromMin: 240, untilMin: 1020 };
const saturday = { fromMin: 300, untilMin: 720 };

type DemoMix = Omit<MixFields, 'plantId' | 'dischargeLimitMin'>;
const mix = (
  code: string,
  strengthPsi: number,
  slumpIn: string,
  cement: DemoMix['cement'] = 'type-i',
): DemoMix => ({
  code: code.toUpperCase().replaceAll(' ', '-'),
  name: code,
  strengthPsi,
  slumpIn,
  cement,
});

type DemoPiece = Omit<EquipmentFields, 'operatorEmail' | 'operatorPhoneE164'>;
const pump = (
  name: string,
  boom: boolean,
  reachFt: string,
  outputYd3PerHour: string,
  setUpMin: number,
): DemoPiece => ({
  kind: 'pump',
  name,
  boom,
  reachFt,
  outputYd3PerHour,
  setUpMin,
  washOutMin: 35,
  travelMin: 30,
});

const supply = {
  'cedar-flat': {
    plants: [
      {
        name: 'Harmony Road plant',
        latDeg: 40.5231,
        lonDeg: -105.0012,
        maxYd3PerHour: '90',
        /** Carries a nightly batch for the town's closures. */
        nightly: true,
        mixes: [
          mix('4500 air', 4500, '4'),
          mix('4000 air', 4000, '4'),
          mix('4000 no air', 4000, '5'),
          mix('4000 straight', 4000, '5'),
          mix('5000 air', 5000, '4'),
          mix('4500 exposed 3/8', 4500, '4'),
          mix('4000 air 3/8', 4000, '5'),
          mix('6000 high early', 6000, '4', 'type-iii'),
        ],
      },
      {
        name: 'Berthoud plant',
        latDeg: 40.3089,
        lonDeg: -105.0601,
        maxYd3PerHour: '60',
        nightly: false,
        mixes: [mix('3500 no air', 3500, '5')],
      },
    ],
    equipment: [
      pump('Boom pump 38 m', true, '122', '120', 30),
      pump('Line pump', false, '300', '40', 45),
      {
        kind: 'laser-screed',
        name: 'Laser screed',
        boom: false,
        reachFt: null,
        outputYd3PerHour: null,
        setUpMin: 30,
        washOutMin: 30,
        travelMin: 30,
      },
      {
        kind: 'saw',
        name: 'Early-entry saw',
        boom: false,
        reachFt: null,
        outputYd3PerHour: null,
        setUpMin: 10,
        washOutMin: 15,
        travelMin: 30,
      },
    ],
  },
  'prairie-line': {
    plants: [
      {
        name: 'Kellogg plant',
        latDeg: 37.6799,
        lonDeg: -97.4012,
        maxYd3PerHour: '60',
        nightly: false,
        mixes: [mix('4000 air', 4000, '4'), mix('4000 no air', 4000, '5')],
      },
    ],
    equipment: [pump('Line pump', false, '250', '35', 45), pump('Boom pump, hired', true, '105', '100', 30)],
  },
} as const;

/** Plants with their mixes and hours, pumps and other equipment of a demo company. */
export async function addSupply(tx: Tx, company: { slug: string; zone: string }): Promise<void> {
  const own = Object.entries(supply).find(([slug]) => slug === company.slug)?.[1];
  if (!own) throw new Error(`The demo has no plants for ${company.slug}.`);
  for (const { mixes, nightly, ...plant } of own.plants) {
    const open = nightly ? { fromMin: 0, untilMin: 1440 } : weekdays;
    const plantId = await createPlant(tx, {
      ...plant,
      zone: company.zone,
      shortLoadYd3: '3',
      orderStepYd3: '0.25',
      hours: [open, open, open, open, open, saturday, null],
      closedDays: [],
      orderEmail: null,
      orderPhoneE164: null,
    });
    for (const one of mixes) await createMix(tx, { ...one, plantId, dischargeLimitMin: null });
  }
  for (const piece of own.equipment)
    await createEquipment(tx, { ...piece, operatorEmail: null, operatorPhoneE164: null });
}
