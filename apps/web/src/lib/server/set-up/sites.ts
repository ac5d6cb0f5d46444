import { NotFound } from '@strikeboard/db/errors';
import { createSite, editSite, endSite, listSites } from '@strikeboard/db/queries/set-up-sites';
import { isZone } from '@strikeboard/domain/zone';
import { z } from 'zod';
import { office } from '../../words/office.en.ts';
import {
  blankable,
  clockMin,
  clockText,
  decimal,
  type FormField,
  type FormValues,
  formObject,
  orNull,
  problemsOf,
  requiredText,
  type SetUpKind,
} from './form.ts';

const words = office.setUp.sites;

const schema = z
  .object({
    name: requiredText(120),
    address: requiredText(300),
    zone: z.string('a time zone').refine(isZone, 'a time zone such as America/Denver'),
    latDeg: orNull(decimal(-90, 90).transform(Number)),
    lonDeg: orNull(decimal(-180, 180).transform(Number)),
    permittedFromMin: orNull(clockMin),
    permittedUntilMin: orNull(clockMin),
    customerName: blankable(120),
    accessNotes: blankable(1000),
  })
  .refine(({ latDeg, lonDeg }) => (latDeg === null) === (lonDeg === null), {
    path: ['lonDeg'],
    message: 'both latitude and longitude, or neither',
  });

const fields: FormField[] = [
  { name: 'name', ...words.fields.name, kind: 'text' },
  { name: 'customerName', ...words.fields.customerName, kind: 'text', optional: true, half: true },
  {
    name: 'address',
    ...words.fields.address,
    kind: 'text',
  },
  { name: 'zone', ...words.fields.zone, kind: 'zone' },
  {
    name: 'latDeg',
    ...words.fields.latDeg,
    kind: 'decimal',
    optional: true,
  },
  { name: 'lonDeg', ...words.fields.lonDeg, kind: 'decimal', optional: true, half: true },
  { name: 'permittedFromMin', ...words.fields.permittedFromMin, kind: 'clock', optional: true },
  {
    name: 'permittedUntilMin',
    ...words.fields.permittedUntilMin,
    kind: 'clock',
    optional: true,
    half: true,
  },
  {
    name: 'accessNotes',
    ...words.fields.accessNotes,
    kind: 'lines',
    optional: true,
  },
];

export const sitesKind: SetUpKind = {
  title: words.title,
  one: words.one,
  about: words.about,
  headings: words.headings,
  endWord: words.endWord,
  rows: async (tx) =>
    (await listSites(tx)).map((site) => ({
      id: site.id,
      cells: [
        site.name,
        site.address,
        site.customerName ?? '',
        site.permittedFromMin === null && site.permittedUntilMin === null
          ? ''
          : `${clockText(site.permittedFromMin) || '0:00'} – ${clockText(site.permittedUntilMin) || '24:00'}`,
        site.zone,
      ],
    })),
  fields: async () => fields,
  values: async (tx, id, { zone }): Promise<FormValues> => {
    if (id === null) return { zone };
    const site = (await listSites(tx)).find((one) => one.id === id);
    if (!site) throw new NotFound('site', id);
    return {
      name: site.name,
      customerName: site.customerName ?? '',
      address: site.address,
      zone: site.zone,
      latDeg: String(site.latDeg ?? ''),
      lonDeg: String(site.lonDeg ?? ''),
      permittedFromMin: clockText(site.permittedFromMin),
      permittedUntilMin: clockText(site.permittedUntilMin),
      accessNotes: site.accessNotes ?? '',
    };
  },
  save: async (tx, id, form) => {
    const parsed = schema.safeParse(formObject(form));
    if (!parsed.success) return problemsOf(parsed.error);
    const { permittedFromMin, permittedUntilMin, ...rest } = parsed.data;
    // An end before the start is the next day's: the row keeps it past 1440.
    const untilMin =
      permittedUntilMin !== null && permittedUntilMin <= (permittedFromMin ?? 0)
        ? permittedUntilMin + 1440
        : permittedUntilMin;
    const site = { ...rest, permittedFromMin, permittedUntilMin: untilMin };
    if (id === null) await createSite(tx, site);
    else await editSite(tx, { siteId: id, fields: site });
    return {};
  },
  end: async (tx, id, { nowMs }) => {
    await endSite(tx, { siteId: id, nowMs });
  },
};
