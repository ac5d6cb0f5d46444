import { NotFound } from '@strikeboard/db/errors';
import { listMembers } from '@strikeboard/db/queries/set-up';
import {
  createCrew,
  editCrew,
  endCrew,
  joinCrew,
  leaveCrew,
  listCrews,
} from '@strikeboard/db/queries/set-up-crews';
import { z } from 'zod';
import { en } from '../../words/en.ts';
import { office } from '../../words/office.en.ts';
import { type FormValues, formObject, orNull, problemsOf, requiredText, type SetUpKind } from './form.ts';

const words = office.setUp.crews;

const schema = z.object({
  name: requiredText(60),
  foremanId: orNull(z.uuid('a person')),
  memberIds: z.array(z.uuid('a person')),
});

export const crewsKind: SetUpKind = {
  title: words.title,
  one: words.one,
  about: words.about,
  headings: words.headings,
  endWord: words.endWord,
  rows: async (tx, { nowMs }) => {
    const names = new Map((await listMembers(tx)).map(({ personId, name }) => [personId, name]));
    const crews = await listCrews(tx, { atMs: nowMs });
    return crews.map(({ id, name, foremanId, memberIds }) => ({
      id,
      cells: [
        name,
        names.get(foremanId ?? '') ?? '',
        memberIds.flatMap((personId) => names.get(personId) ?? []).join(', '),
      ],
    }));
  },
  fields: async (tx) => {
    const members = (await listMembers(tx)).map(({ personId, name, role }) => ({
      value: personId,
      label: `${name} (${en.roles[role].toLowerCase()})`,
    }));
    return [
      { name: 'name', ...words.fields.name, kind: 'text' },
      {
        name: 'foremanId',
        ...words.fields.foremanId,
        kind: 'select',
        options: members,
        optional: true,
        half: true,
      },
      { name: 'memberIds', ...words.fields.memberIds, kind: 'checks', options: members },
    ];
  },
  values: async (tx, id, { nowMs }): Promise<FormValues> => {
    if (id === null) return {};
    const crew = (await listCrews(tx, { atMs: nowMs })).find((one) => one.id === id);
    if (!crew) throw new NotFound('crew', id);
    return { name: crew.name, foremanId: crew.foremanId ?? '', memberIds: crew.memberIds };
  },
  save: async (tx, id, form, { nowMs }) => {
    const parsed = schema.safeParse(formObject(form, ['memberIds']));
    if (!parsed.success) return problemsOf(parsed.error);
    const { name, foremanId, memberIds } = parsed.data;
    if (id !== null) await editCrew(tx, { crewId: id, fields: { name, foremanId } });
    const crewId = id ?? (await createCrew(tx, { name, foremanId }));
    const crew = (await listCrews(tx, { atMs: nowMs })).find((one) => one.id === crewId);
    const before = crew?.memberIds ?? [];
    for (const personId of memberIds.filter((one) => !before.includes(one))) {
      await joinCrew(tx, { crewId, personId, fromMs: nowMs });
    }
    for (const personId of before.filter((one) => !memberIds.includes(one))) {
      await leaveCrew(tx, { crewId, personId, atMs: nowMs });
    }
    return {};
  },
  end: async (tx, id, { nowMs }) => {
    await endCrew(tx, { crewId: id, nowMs });
  },
};
