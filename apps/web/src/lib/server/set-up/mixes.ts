import { NotFound } from '@strikeboard/db/errors';
import { createMix, editMix, endSupply, listMixes, listPlants } from '@strikeboard/db/queries/set-up-supply';
import { cements } from '@strikeboard/domain/vocabulary';
import { z } from 'zod';
import { office } from '../../words/office.en.ts';
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

const words = office.setUp.mixes;

const schema = z.object({
  plantId: z.uuid('a plant'),
  code: requiredText(60),
  name: requiredText(120),
  strengthPsi: whole(500, 20_000),
  slumpIn: orNull(decimal(0, 12)),
  cement: z.enum(cements, 'a type of cement'),
  dischargeLimitMin: orNull(whole(15, 600)),
});

export const mixesKind: SetUpKind = {
  title: words.title,
  one: words.one,
  about: words.about,
  headings: words.headings,
  endWord: words.endWord,
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
    { name: 'code', ...words.fields.code, kind: 'text' },
    { name: 'name', ...words.fields.name, kind: 'text', half: true },
    {
      name: 'plantId',
      ...words.fields.plantId,
      kind: 'select',
      options: (await listPlants(tx)).map(({ id, name }) => ({ value: id, label: name })),
    },
    {
      name: 'cement',
      ...words.fields.cement,
      kind: 'select',
      options: cements.map((value) => ({ value, label: words.cements[value] })),
      half: true,
    },
    { name: 'strengthPsi', ...words.fields.strengthPsi, kind: 'whole' },
    { name: 'slumpIn', ...words.fields.slumpIn, kind: 'decimal', optional: true, half: true },
    {
      name: 'dischargeLimitMin',
      ...words.fields.dischargeLimitMin,
      kind: 'whole',
      optional: true,
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
