import type { Language } from '@strikeboard/domain/vocabulary';
import { sql } from 'drizzle-orm';
import type { Tx } from '../client.ts';
import { newId } from '../ids.ts';

/** How a company knows someone whom it adds. */
export interface Contact {
  name: string;
  email: string | null;
  phoneE164: string | null;
  language: Language;
  /** IANA zone for someone who is new. */
  zone: string;
}

/**
 * The person behind each contact, in the same order: whoever has the e-mail address; else, where there is exactly
 * one, whoever is known by the same phone and name and has given no other e-mail address; else someone new. So one
 * sub is one person in several companies. A phone alone is not enough, for phones are shared.
 */
export async function peopleForContacts(tx: Tx, contacts: readonly Contact[]): Promise<string[]> {
  if (contacts.length === 0) return [];
  const wanted = contacts.map((contact, index) => ({
    position: index,
    new_id: newId(),
    name: contact.name,
    email: contact.email,
    phone_e164: contact.phoneE164,
    language: contact.language,
    zone: contact.zone,
  }));
  const { rows } = await tx.execute<{ person_id: string }>(
    sql`select person_id from app.people_for_contacts(${JSON.stringify(wanted)}::jsonb) order by at_position`,
  );
  if (rows.length !== contacts.length) throw new Error('A contact has no person.');
  return rows.map((row) => row.person_id);
}
