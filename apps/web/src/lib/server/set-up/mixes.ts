import { NotFound } from '@strikeboard/db/errors';
import { createMix, editMix, endSupply, listMixes, listPlants } from '@strikeboard/db/queries/set-up-supply';
import { cements } from '@strikeboard/domain/vocabulary';
import { z } from 'zod';
import {
  decimal,
  type FormValues,
  formObject,
  orNull,
  problemsOf,
  requiredText,
  type SetUpKind,
  whole,
} from './form.ts';
import { shortDecimal } from './plants.ts';

const schema = z.object({
  plantId: z.uuid('a plant'),
  code: requiredText(60),
  name: requiredText(120),
  strengthPsi: whole(500, 20_000),
  slumpIn: orNull(decimal(0, 12)),
  cement: z.enum(cements, 'a type of cement'),
  dischargeLimitMin: orNull(whole(15, 600)),
});

const cementNames = {
  'type-i': 'Type I',
  'type-ii': 'Type II',
  'type-iii': 'Type III (high early)',
} as const;

export const mixesKind: SetUpKind = {
  title: 'Mixes',
  one: 'mix',
  about: 'What each plant carries, by the code you order it with.',
  headings: ['Code', 'Name', 'Plant', 'Strength', 'Slump', 'Discharge within'],
  endWord: 'Carried no more',
  rows: async (tx) => {
    const plants = new Map((await listPlants(tx, { ended: true })).map(({ id, name }) => [id, name]));
    return (await listMixes(tx)).map((mix) => ({
      id: mix.id,
      cells: [
        mix.code,
        mix.name,
        plants.get(mix.plantId) ?? '',
        `${mix.strengthPsi.toLocaleString('en-US')} psi`,
        mix.slumpIn === null ? '' : `${shortDecimal(mix.slumpIn)} in`,
        mix.dischargeLimitMin === null ? '' : `${mix.dischargeLimitMin} min`,
      ],
    }));
  },
  fields: async (tx) => [
    { name: 'code', label: 'Code', kind: 'text', hint: 'As the plant calls it.' },
    { name: 'name', label: 'Name', kind: 'text', half: true },
    {
      name: 'plantId',
      label: 'Plant',
      kind: 'select',
      options: (await listPlants(tx)).map(({ id, name }) => ({ value: id, label: name })),
      hint: 'A mix stays with its plant.',
    },
    {
      name: 'cement',
      label: 'Cement',
      kind: 'select',
      options: cements.map((value) => ({ value, label: cementNames[value] })),
      half: true,
    },
    { name: 'strengthPsi', label: 'Strength, psi', kind: 'whole' },
    { name: 'slumpIn', label: 'Slump, in', kind: 'decimal', optional: true, half: true },
    {
      name: 'dischargeLimitMin',
      label: 'Discharge within, minutes',
      kind: 'whole',
      optional: true,
      hint: "Blank: the company's rule.",
    },
  ],
  values: async (tx, id): Promise<FormValues> => {
    if (id === null) return { cement: 'type-i' };
    const mix = (await listMixes(tx)).find((one) => one.id === id);
    if (!mix) throw new NotFound('mix', id);
    return {
      plantId: mix.plantId,
      code: mix.code,
      name: mix.name,
      cement: mix.cement,
      strengthPsi: String(mix.strengthPsi),
      slumpIn: shortDecimal(mix.slumpIn),
      dischargeLimitMin: String(mix.dischargeLimitMin ?? ''),
    };
  },
  save: async (tx, id, form) => {
    const parsed = schema.safeParse(formObject(form));
    if (!parsed.success) return problemsOf(parsed.error);
    const { plantId, ...fields } = parsed.data;
    if (id === null) await createMix(tx, { plantId, ...fields });
    else await editMix(tx, { id, fields });
    return {};
  },
  end: async (tx, id, { nowMs }) => {
    await endSupply(tx, { kind: 'mix', id, nowMs });
  },
};
