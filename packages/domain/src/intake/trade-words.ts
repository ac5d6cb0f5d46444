import type { Cement, Finish, PlacingMethod, Role } from '../vocabulary.ts';
import { type Parsed, type PlainReasonCode, parsed, type Reason, refused } from './reason.ts';
import { fold, tidy } from './text.ts';

/** Folded words for each value. What the trade calls things: common practice, no source. */
type WordList<T extends string> = Readonly<Record<T, string>>;

const ROLE_WORDS: WordList<Role> = {
  owner: 'owner, co owner, boss, president, principal, dueno, duena, propietario, patron',
  dispatcher:
    'dispatcher, dispatch, scheduler, scheduling, office, office manager, coordinator, ops, operations, despachador, despachadora, despacho, oficina',
  foreman:
    'foreman, foreperson, forewoman, crew foreman, lead, lead man, leadman, crew lead, crew leader, capataz, mayordomo, encargado, lider',
  finisher:
    'finisher, concrete finisher, cement mason, cement finisher, mason, placer, laborer, labourer, labor, helper, apprentice, crew, crew member, form setter, acabador, terminador, albanil, obrero, peon, ayudante, cementero',
  sub: 'sub, subs, sub finisher, finisher sub, subcontractor, sub contractor, 1099, contract, contractor, subcontratista, subcontratado',
};

const FINISH_WORDS: WordList<Finish> = {
  float:
    'float, floated, bull float, mag float, magnesium float, wood float, rough, rough float, flotado, flota',
  broom:
    'broom, broomed, brm, light broom, lt broom, medium broom, med broom, heavy broom, fine broom, brushed, escobillado, escobado, escoba, cepillado',
  trowel:
    'trowel, troweled, trowelled, steel trowel, light trowel, smooth, smooth trowel, llana, allanado, liso',
  'hard-trowel':
    'hard trowel, hard troweled, hard trowelled, hard steel trowel, ht, burnished, burnish, power trowel, machine trowel, llana dura, pulido, pulido con maquina',
  exposed:
    'exposed, exposed aggregate, exposed agg, exp agg, exp aggregate, expo, ea, agregado expuesto, expuesto, lavado',
  stamped: 'stamped, stamp, stamped concrete, stmp, estampado',
};

const PLACING_WORDS: WordList<PlacingMethod> = {
  chute:
    'chute, truck chute, chute off truck, direct, tailgate, tail gate, off truck, off the truck, truck, mixer, canaleta, canal, canalon, directo',
  buggy:
    'buggy, buggies, power buggy, georgia buggy, concrete buggy, wheelbarrow, wheel barrow, carretilla, carretillas, vagoneta',
  'line-pump':
    'line pump, line, linepump, trailer pump, ground line, grout pump, hose, bomba de linea, bomba linea, bomba estacionaria, manguera',
  'boom-pump':
    'boom pump, boom, boompump, boom truck, z boom, bomba pluma, bomba de pluma, pluma, bomba telescopica',
};

const CEMENT_WORDS: WordList<Cement> = {
  'type-i': 'i, 1, normal, ordinary, gu, general use, portland, comun',
  'type-ii': 'ii, 2, ms, moderate sulfate, moderate, moderado',
  'type-iii':
    'iii, 3, he, high early, hi early, high early strength, alta resistencia temprana, resistencia temprana',
};

function lookup<T extends string>(words: WordList<T>, values: readonly T[]): ReadonlyMap<string, T> {
  return new Map(values.flatMap((value) => words[value].split(', ').map((word) => [word, value] as const)));
}

const ROLES = lookup(ROLE_WORDS, ['owner', 'dispatcher', 'foreman', 'finisher', 'sub']);
const FINISHES = lookup(FINISH_WORDS, ['float', 'broom', 'trowel', 'hard-trowel', 'exposed', 'stamped']);
const PLACINGS = lookup(PLACING_WORDS, ['chute', 'buggy', 'line-pump', 'boom-pump']);
const CEMENTS = lookup(CEMENT_WORDS, ['type-i', 'type-ii', 'type-iii']);

/** A member's role: "Crew lead" is a foreman, "laborer" a finisher, "1099" a sub, Spanish words alike. */
export function parseRole(text: string): Parsed<Role> {
  return find(ROLES, fold(text), 'role');
}

/**
 * A finish: `broom`, "Broom finish", "exp. agg.", "HT", "estampado". What follows "w/", "with", a dash or a bracket
 * ("broom w/ picture frame") is left out with a warning; two finishes in one cell are refused.
 */
export function parseFinish(text: string): Parsed<Finish> {
  const { head, rest } = splitRest(text);
  const word = fold(head).replace(/^(?:acabado|finish) | (?:finish|finished|fin|surface)$/g, '');
  return find(FINISHES, word, 'finish', rest);
}

/** Finishes a person can do, separated by comma, slash, semicolon, `&` or "and". */
export function parseSkills(text: string): Parsed<Finish[]> {
  const word = fold(text);
  if (word === 'all' || word === 'any' || word === 'todo' || word === 'todos') return parsed([]);
  const skills: Finish[] = [];
  for (const piece of tidy(text).split(/[,;/&+|]| and | y /i)) {
    if (fold(piece) === '') continue;
    const finish = parseFinish(piece);
    if (!finish.ok) return finish;
    if (!skills.includes(finish.value)) skills.push(finish.value);
  }
  return parsed(skills);
}

/** A placing method: "off the truck" is the chute, "38m boom" a boom pump. "Pump" alone does not say which. */
export function parsePlacingMethod(text: string): Parsed<PlacingMethod> {
  const { head, rest } = splitRest(text);
  const word = fold(head)
    .replace(/^(?:by|with|con|por) /, '')
    .replace(/\b\d+ ?(?:m|meters?|metros?|ft)\b/g, '')
    .replace(/\s+/g, ' ')
    .trim();
  if (/^(?:concrete )?(?:pump|pumped|bomba|bombeado)$/.test(word)) return refused({ code: 'which-pump' });
  return find(PLACINGS, word, 'placing-method', rest);
}

/**
 * A cement: "Type I", "type 2", "III", "high early". Type I/II meets both and is read as Type I, as is portland-limestone
 * Type IL (ASTM C595), each with a warning; types IV and V have no setting figures here and are refused.
 */
export function parseCement(text: string): Parsed<Cement> {
  const word = fold(text)
    .replace(/^(?:astm )?(?:c150|c595|c1157) /, '')
    .replace(/^(?:type|ty|tipo|cement|cemento) /, '');
  if (/^(?:i ii|1 2|il|1l|il \d+|1l \d+)$/.test(word))
    return parsed('type-i', [{ code: 'read-as', assumed: 'type-i' }]);
  return find(CEMENTS, word, 'cement');
}

function find<T>(words: ReadonlyMap<string, T>, word: string, code: PlainReasonCode, rest = ''): Parsed<T> {
  const value = words.get(word);
  if (value === undefined) return refused({ code });
  const warnings: Reason[] = rest === '' ? [] : [{ code: 'left-out', text: rest }];
  return parsed(value, warnings);
}

function splitRest(text: string): { head: string; rest: string } {
  const plain = tidy(text);
  const match = /^(.*?\S)\s*(?:\bw\/|\bwith\b|\bcon\b|\s[-–—]\s|[(:,]|\s@)\s*(.*)$/i.exec(plain);
  if (!match) return { head: plain, rest: '' };
  const rest = (match[2] ?? '').replace(/[)\s]+$/, '');
  // A second finish or method after a comma is no remark: let the whole cell be refused.
  const second = fold(rest);
  const known = FINISHES.has(second) || PLACINGS.has(second);
  return known ? { head: plain, rest: '' } : { head: match[1] ?? plain, rest };
}
