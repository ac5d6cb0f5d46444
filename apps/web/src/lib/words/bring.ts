import type { Finish, Language, PlacingMethod, VisitKind } from '@strikeboard/domain/vocabulary';

/** What to bring, by the work. Common practice, no source. */
const lists: Readonly<
  Record<
    Language,
    {
      always: readonly string[];
      kinds: Readonly<Record<VisitKind, readonly string[]>>;
      finishes: Readonly<Record<Finish, readonly string[]>>;
      methods: Readonly<Record<PlacingMethod, readonly string[]>>;
    }
  >
> = {
  en: {
    always: ['Hard hat, safety glasses, gloves', 'Water'],
    kinds: {
      prep: ['Work boots', 'Tape, level, hammer'],
      pour: ['Rubber boots', 'Knee pads', 'Hand float and edger'],
      saw: ['Hearing protection', 'Dust mask'],
      strip: ['Work boots', 'Pry bar and hammer'],
      protect: ['Work boots'],
      seal: ['Work boots', 'Respirator'],
      other: ['Work boots'],
    },
    finishes: {
      float: [],
      broom: ['Broom'],
      trowel: ['Hand trowel'],
      'hard-trowel': ['Hand trowel', 'Kneeboards'],
      exposed: ['Soft brush'],
      stamped: ['Kneeboards'],
    },
    methods: {
      chute: ['Come-along'],
      buggy: ['Come-along'],
      'line-pump': ['Eye protection at the hose'],
      'boom-pump': ['Eye protection at the hose'],
    },
  },
  es: {
    always: ['Casco, lentes de seguridad, guantes', 'Agua'],
    kinds: {
      prep: ['Botas de trabajo', 'Cinta, nivel, martillo'],
      pour: ['Botas de hule', 'Rodilleras', 'Flota de mano y canteador'],
      saw: ['Protección de oídos', 'Mascarilla para polvo'],
      strip: ['Botas de trabajo', 'Barra y martillo'],
      protect: ['Botas de trabajo'],
      seal: ['Botas de trabajo', 'Respirador'],
      other: ['Botas de trabajo'],
    },
    finishes: {
      float: [],
      broom: ['Escoba'],
      trowel: ['Llana de mano'],
      'hard-trowel': ['Llana de mano', 'Tablas para rodillas'],
      exposed: ['Cepillo suave'],
      stamped: ['Tablas para rodillas'],
    },
    methods: {
      chute: ['Jalador'],
      buggy: ['Jalador'],
      'line-pump': ['Lentes junto a la manguera'],
      'boom-pump': ['Lentes junto a la manguera'],
    },
  },
};

/** What a person should bring to a visit. `finish` and `method` are null for visits that place nothing. */
export function whatToBring(
  language: Language,
  work: { kind: VisitKind; finish: Finish | null; method: PlacingMethod | null },
): string[] {
  const list = lists[language];
  return [
    ...list.kinds[work.kind],
    ...(work.finish === null ? [] : list.finishes[work.finish]),
    ...(work.method === null ? [] : list.methods[work.method]),
    ...list.always,
  ];
}
