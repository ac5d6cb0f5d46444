import type { Tx } from '@strikeboard/db/client';
import { NotFound } from '@strikeboard/db/errors';
import { addMember, editMember, endMember, listMembers } from '@strikeboard/db/queries/set-up';
import { listCrews } from '@strikeboard/db/queries/set-up-crews';
import { finishes, languages, type Role, roles } from '@strikeboard/domain/vocabulary';
import { z } from 'zod';
import { ProblemError } from '../../api/problems.ts';
import { en } from '../../words/en.ts';
import { office } from '../../words/office.en.ts';
import {
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

const words = office.setUp.people;

const schema = z
  .object({
    name: requiredText(120),
    role: z.enum(roles, 'a role'),
    phoneE164: orNull(phone),
    email: orNull(email),
    language: z.enum(languages, 'a language'),
    skills: z.array(z.enum(finishes, 'a finish')),
  })
  .refine((person) => person.phoneE164 !== null || person.email !== null, {
    path: ['phoneE164'],
    message: 'a phone number or an e-mail address, else nobody can tell them anything',
  });

const fields: FormField[] = [
  { name: 'name', ...words.fields.name, kind: 'text' },
  {
    name: 'role',
    ...words.fields.role,
    kind: 'select',
    options: roles.map((value) => ({ value, label: en.roles[value] })),
    half: true,
  },
  { name: 'phoneE164', ...words.fields.phoneE164, kind: 'text', optional: true },
  { name: 'email', ...words.fields.email, kind: 'text', optional: true, half: true },
  {
    name: 'language',
    ...words.fields.language,
    kind: 'select',
    options: languages.map((value) => ({ value, label: words.languages[value] })),
  },
  {
    name: 'skills',
    ...words.fields.skills,
    kind: 'checks',
    options: finishes.map((value) => ({ value, label: en.finishes[value] })),
  },
];

export const peopleKind: SetUpKind = {
  title: words.title,
  one: words.one,
  about: words.about,
  headings: words.headings,
  endWord: words.endWord,
  rows: async (tx, { nowMs }) => {
    const crews = await listCrews(tx, { atMs: nowMs });
    const members = await listMembers(tx);
    return members.map((member) => ({
      id: member.personId,
      cells: [
        member.name,
        en.roles[member.role],
        crews
          .filter(({ memberIds }) => memberIds.includes(member.personId))
          .map(({ name }) => name)
          .join(', '),
        member.phoneE164 ?? '',
        member.email ?? '',
        words.languages[member.language],
      ],
    }));
  },
  fields: async () => fields,
  values: async (tx, id): Promise<FormValues> => {
    if (id === null) return { role: 'finisher', language: 'en' };
    const member = (await listMembers(tx)).find(({ personId }) => personId === id);
    if (!member) throw new NotFound('person', id);
    const { name, role, phoneE164, email: address, language, skills } = member;
    return { name, role, phoneE164: phoneE164 ?? '', email: address ?? '', language, skills };
  },
  save: async (tx, id, form, { role }) => {
    const parsed = schema.safeParse(formObject(form, ['skills']));
    if (!parsed.success) return problemsOf(parsed.error);
    const before = id === null ? null : await roleOf(tx, id);
    const isOfficeRole = officeRoles.has(parsed.data.role) || (before !== null && officeRoles.has(before));
    if (role !== 'owner' && isOfficeRole && parsed.data.role !== before) return { role: words.ownersOnly };
    if (id === null) await addMember(tx, parsed.data);
    else await editMember(tx, { personId: id, fields: parsed.data });
    return {};
  },
  end: async (tx, id, { nowMs, role }) => {
    if (role !== 'owner' && officeRoles.has(await roleOf(tx, id)))
      throw new ProblemError('not-allowed', words.ownersOnly);
    await endMember(tx, { personId: id, nowMs });
  },
};

const officeRoles: ReadonlySet<Role> = new Set<Role>(['owner', 'dispatcher']);

/** @throws NotFound when they do not belong to the company */
async function roleOf(tx: Tx, personId: string): Promise<Role> {
  const member = (await listMembers(tx)).find((one) => one.personId === personId);
  if (!member) throw new NotFound('person', personId);
  return member.role;
}
