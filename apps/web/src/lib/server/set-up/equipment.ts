import { NotFound } from '@strikeboard/db/errors';
import {
  createEquipment,
  editEquipment,
  endSupply,
  listEquipment,
} from '@strikeboard/db/queries/set-up-supply';
import { equipmentKinds } from '@strikeboard/domain/vocabulary';
import { z } from 'zod';
import { office } from '../../words/office.en.ts';
import {
  decimal,
  email,
  type FormField,
  type FormValues,
  formObject,
  orNull,
  phone,
  problemsOf,
  requiredText,
  type SetUpKind,
  whole,
} from './form.ts';
import { shortDecimal } from './plants.ts';

const words = office.setUp.equipment;

const schema = z.object({
  kind: z.enum(equipmentKinds, 'a kind'),
  name: requiredText(120),
  boom: z
    .literal('on')
    .optional()
    .transform((value) => value === 'on'),
  reachFt: orNull(decimal(1, 500)),
  outputYd3PerHour: orNull(decimal(1, 400)),
  setUpMin: whole(0, 1440),
  washOutMin: whole(0, 1440),
  travelMin: whole(0, 1440),
  operatorEmail: orNull(email),
  operatorPhoneE164: orNull(phone),
});

const fields: FormField[] = [
  { name: 'name', ...words.fields.name, kind: 'text' },
  {
    name: 'kind',
    ...words.fields.kind,
    kind: 'select',
    options: equipmentKinds.map((value) => ({ value, label: words.kinds[value] })),
    half: true,
  },
  { name: 'boom', ...words.fields.boom, kind: 'checkbox' },
  { name: 'reachFt', ...words.fields.reachFt, kind: 'decimal', optional: true },
  { name: 'outputYd3PerHour', ...words.fields.outputYd3PerHour, kind: 'decimal', optional: true, half: true },
  { name: 'travelMin', ...words.fields.travelMin, kind: 'whole' },
  { name: 'setUpMin', ...words.fields.setUpMin, kind: 'whole', half: true },
  { name: 'washOutMin', ...words.fields.washOutMin, kind: 'whole' },
  { name: 'operatorPhoneE164', ...words.fields.operatorPhoneE164, kind: 'text', optional: true },
  { name: 'operatorEmail', ...words.fields.operatorEmail, kind: 'text', optional: true, half: true },
];

export const equipmentKind: SetUpKind = {
  title: words.title,
  one: words.one,
  about: words.about,
  headings: words.headings,
  endWord: words.endWord,
  rows: async (tx) =>
    (await listEquipment(tx)).map((piece) => ({
      id: piece.id,
      cells: [
        piece.name,
        piece.kind === 'pump' ? (piece.boom ? words.boomPump : words.linePump) : words.kinds[piece.kind],
        piece.reachFt === null ? '' : `${shortDecimal(piece.reachFt)} ft`,
        piece.outputYd3PerHour === null ? '' : `${shortDecimal(piece.outputYd3PerHour)} yd³/h`,
        `${piece.travelMin} + ${piece.setUpMin} + ${piece.washOutMin} min`,
        [piece.operatorPhoneE164, piece.operatorEmail].filter((part) => part !== null).join(', '),
      ],
    })),
  fields: async () => fields,
  values: async (tx, id): Promise<FormValues> => {
    if (id === null) return { kind: 'pump', setUpMin: '30', washOutMin: '30', travelMin: '30' };
    const piece = (await listEquipment(tx)).find((one) => one.id === id);
    if (!piece) throw new NotFound('equipment', id);
    return {
      name: piece.name,
      kind: piece.kind,
      boom: piece.boom ? 'on' : '',
      reachFt: shortDecimal(piece.reachFt),
      outputYd3PerHour: shortDecimal(piece.outputYd3PerHour),
      setUpMin: String(piece.setUpMin),
      washOutMin: String(piece.washOutMin),
      travelMin: String(piece.travelMin),
      operatorEmail: piece.operatorEmail ?? '',
      operatorPhoneE164: piece.operatorPhoneE164 ?? '',
    };
  },
  save: async (tx, id, form) => {
    const parsed = schema.safeParse(formObject(form));
    if (!parsed.success) return problemsOf(parsed.error);
    if (id === null) await createEquipment(tx, parsed.data);
    else await editEquipment(tx, { id, fields: parsed.data });
    return {};
  },
  end: async (tx, id, { nowMs }) => {
    await endSupply(tx, { kind: 'equipment', id, nowMs });
  },
};
