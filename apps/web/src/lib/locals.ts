import type { CompanyRules } from '@strikeboard/domain/company-rules';
import type { Language, Role } from '@strikeboard/domain/vocabulary';

/** Who is signed in. */
export interface SignedIn {
  id: string;
  name: string;
  email: string | null;
  language: Language;
  /** IANA zone in which the person reads times that belong to no site. */
  zone: string;
}

/** The company of the address, and the role in it of the person who is signed in. */
export interface Company {
  id: string;
  slug: string;
  name: string;
  role: Role;
  /** IANA zone of the office. */
  zone: string;
  rules: CompanyRules;
}
