import { NotFound } from '@strikeboard/db/errors';
import {
  createPlant,
  editPlant,
  endSupply,
  listPlants,
  type PlantFields,
} from '@strikeboard/db/queries/set-up-supply';
import { isSiteDay, isZone } from '@strikeboard/domain/zone';
import { z } from 'zod';
import { office } from '../../words/office.en.ts';
import {
  clockMin,
  clockText,
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
} from './form.ts';

const words = office.setUp.plants;
const { weekDays } = office.setUp;

const schema = z
  .object({
    name: requiredText(120),
    zone: z.string('a time zone').refine(isZone, 'a time zone such as America/Denver'),
    latDeg: orNull(decimal(-90, 90).transform(Number)),
    lonDeg: orNull(decimal(-180, 180).transform(Number)),
    maxYd3PerHour: orNull(decimal(1, 2000)),
    shortLoadYd3: orNull(decimal(0.25, 15)),
    orderStepYd3: decimal(0.001, 5),
    closedDays: z
      .string()
      .optional()
      .transform((text) => (text ?? '').split(/[\s,;]+/).filter((day) => day !== ''))
      .refine((days) => days.every(isSiteDay), 'days as YYYY-MM-DD, one per line'),
    orderEmail: orNull(email),
    orderPhoneE164: orNull(phone),
  })
  .refine(({ latDeg, lonDeg }) => (latDeg === null) === (lonDeg === null), {
    path: ['lonDeg'],
    message: 'both latitude and longitude, or neither',
  });

const fields: FormField[] = [
  { name: 'name', ...words.fields.name, kind: 'text' },
  { name: 'zone', ...words.fields.zone, kind: 'zone', half: true },
  { name: 'hours', ...words.fields.hours, kind: 'week-hours' },
  {
    name: 'closedDays',
    ...words.fields.closedDays,
    kind: 'lines',
    optional: true,
  },
  { name: 'maxYd3PerHour', ...words.fields.maxYd3PerHour, kind: 'decimal', optional: true },
  { name: 'shortLoadYd3', ...words.fields.shortLoadYd3, kind: 'decimal', optional: true, half: true },
  { name: 'orderStepYd3', ...words.fields.orderStepYd3, kind: 'decimal' },
  { name: 'latDeg', ...words.fields.latDeg, kind: 'decimal', optional: true },
  { name: 'lonDeg', ...words.fields.lonDeg, kind: 'decimal', optional: true, half: true },
  { name: 'orderPhoneE164', ...words.fields.orderPhoneE164, kind: 'text', optional: true },
  { name: 'orderEmail', ...words.fields.orderEmail, kind: 'text', optional: true, half: true },
];

export const plantsKind: SetUpKind = {
  title: words.title,
  one: words.one,
  about: words.about,
  headings: words.headings,
  endWord: words.endWord,
  rows: async (tx) =>
    (await listPlants(tx)).map((plant) => ({
      id: plant.id,
      cells: [
        plant.name,
        hoursText(plant.hours),
        plant.maxYd3PerHour === null ? '' : String(Number(plant.maxYd3PerHour)),
        plant.shortLoadYd3 === null ? '' : `${Number(plant.shortLoadYd3)} yd³`,
        [plant.orderPhoneE164, plant.orderEmail].filter((part) => part !== null).join(', '),
      ],
    })),
  fields: async () => fields,
  values: async (tx, id, { zone }): Promise<FormValues> => {
    const workdays = Object.fromEntries(
      [0, 1, 2, 3, 4].flatMap((day) => [
        [`from${day}`, '06:00'],
        [`until${day}`, '17:00'],
      ]),
    );
    if (id === null) return { zone, orderStepYd3: '0.25', ...workdays };
    const plant = (await listPlants(tx)).find((one) => one.id === id);
    if (!plant) throw new NotFound('plant', id);
    return {
      name: plant.name,
      zone: plant.zone,
      latDeg: String(plant.latDeg ?? ''),
      lonDeg: String(plant.lonDeg ?? ''),
      maxYd3PerHour: shortDecimal(plant.maxYd3PerHour),
      shortLoadYd3: shortDecimal(plant.shortLoadYd3),
      orderStepYd3: shortDecimal(plant.orderStepYd3),
      closedDays: plant.closedDays.join('\n'),
      orderEmail: plant.orderEmail ?? '',
      orderPhoneE164: plant.orderPhoneE164 ?? '',
      ...Object.fromEntries(
        plant.hours.flatMap((hours, day) => [
          [`from${day}`, clockText(hours?.fromMin ?? null)],
          [`until${day}`, clockText(hours?.untilMin ?? null)],
        ]),
      ),
    };
  },
  save: async (tx, id, form) => {
    const parsed = schema.safeParse(formObject(form));
    const hours = readHours(form);
    const problems = {
      ...(parsed.success ? {} : problemsOf(parsed.error)),
      ...(hours === null ? { hours: words.bothTimes } : {}),
    };
    if (!parsed.success || hours === null) return problems;
    const plant = { ...parsed.data, hours };
    if (id === null) await createPlant(tx, plant);
    else await editPlant(tx, { id, fields: plant });
    return {};
  },
  end: async (tx, id, { nowMs }) => {
    await endSupply(tx, { kind: 'plant', id, nowMs });
  },
};

/** Seven days, Monday first; null when a day has one time only or one that is no time. */
function readHours(form: FormData): PlantFields['hours'] | null {
  const hours: PlantFields['hours'] = [];
  for (let day = 0; day < 7; day++) {
    const from = form.get(`from${day}`);
    const until = form.get(`until${day}`);
    if (!from && !until) {
      hours.push(null);
      continue;
    }
    const fromMin = clockMin.safeParse(from);
    const untilMin = clockMin.safeParse(until);
    if (!fromMin.success || !untilMin.success) return null;
    // Midnight at the end of a day is its last minute and one; at the start, its first.
    hours.push({ fromMin: fromMin.data, untilMin: untilMin.data === 0 ? 1440 : untilMin.data });
  }
  return hours;
}

/** "Mon–Fri 06:00–17:00, Sat 07:00–12:00". */
function hoursText(hours: PlantFields['hours']): string {
  const texts = hours.map((one) =>
    one ? `${clockText(one.fromMin)}–${one.untilMin === 1440 ? '24:00' : clockText(one.untilMin)}` : null,
  );
  const parts: string[] = [];
  for (let day = 0; day < texts.length; ) {
    const text = texts[day] ?? null;
    let last = day;
    while (last + 1 < texts.length && texts[last + 1] === text) last++;
    if (text !== null) {
      parts.push(`${last === day ? weekDays[day] : `${weekDays[day]}–${weekDays[last]}`} ${text}`);
    }
    day = last + 1;
  }
  return parts.join(', ');
}

/** Without the zeros that a column of fixed scale adds. */
export function shortDecimal(text: string | null): string {
  if (text === null) return '';
  return text.includes('.') ? text.replace(/\.?0+$/, '') : text;
}
