import type { IntakeKind } from '@strikeboard/domain/intake/fields';

/** What is brought in, and what its file should say. */
export const kindWords: Readonly<
  Record<IntakeKind, { one: string; many: string; Many: string; columns: string }>
> = {
  people: {
    one: 'person',
    many: 'people',
    Many: 'People',
    columns: 'Name, phone, e-mail, role, crew, language, finishes they can do',
  },
  crews: { one: 'crew', many: 'crews', Many: 'Crews', columns: 'Crew, foreman, members' },
  sites: {
    one: 'site',
    many: 'sites',
    Many: 'Sites',
    columns: 'Name, address, coordinates, time zone, permitted hours, customer, access notes',
  },
  pours: {
    one: 'pour',
    many: 'pours',
    Many: 'Waiting pours',
    columns:
      'Site, slab, day wanted, yards, thickness, size, finish, placing method, mix, first truck, notes',
  },
};
