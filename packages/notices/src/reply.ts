import type { Language } from '@strikeboard/domain/vocabulary';

/** What a text that someone sent means. */
export type ReplyKind = 'yes' | 'no' | 'stop' | 'start' | 'help' | 'other';

/**
 * The words that end and start texts with US carriers, STOP and HELP among them, and those that 47 CFR
 * 64.1200(a)(10) names (published); ARRET, OPTOUT, REMOVE and TD are from cloud vendors' lists (published). The Spanish
 * ones, and ways of asking in a few words ("any reasonable wording"), are common practice, no source.
 */
const STOP = phrases(
  'stop, stopall, stop all, unsubscribe, cancel, end, quit, revoke, opt out, optout, remove, arret, td',
  'stop it, please stop, stop please, stop now, stop stop, stop texting, stop texting me, please stop texting me, stop messaging me, stop messages, stop texts, stop sending me texts, stop sending me messages, stop sending texts, stop contacting me',
  'unsubscribe me, unsubscribe please, remove me, please remove me, remove me from the list, remove me from your list, take me off, take me off the list, take me off your list, opt me out, no more texts, no more messages, dont text me, do not text me, dont text me anymore, do not text me anymore, quit texting me, cancel texts, end texts, stp, sotp, stopp',
  'alto, basta, parar, pare, paren, para ya, ya basta, detener, detenganse, cancelar, baja, darme de baja, dar de baja, denme de baja, quiero darme de baja, salir, terminar, no mas mensajes, no mas textos, ya no me manden mensajes, no me manden mensajes, no me manden mas mensajes, ya no me manden mas mensajes, no quiero mensajes, no quiero mas mensajes, dejen de mandar mensajes, dejen de mandarme mensajes, quitenme, quitenme de la lista, borrenme de la lista',
);
const START = phrases(
  'start, unstop, restart, subscribe, opt in, optin, start texts, resume',
  'empezar, iniciar, inicio, comenzar, alta, darme de alta, suscribir, reanudar, activar',
);
const HELP = phrases('help, info, information, help me', 'ayuda, informacion, ayudame');

const YES = phrases(
  'yes, y, ye, yea, yeah, yea man, yep, yup, yess, yesss, yas, yse, yed, yws, yaa, ya, yah, aye, sure, sure thing, ok, okay, okey, k, kk, okk, oki, ok boss, confirmed, confirm, affirmative, copy, copy that, roger, roger that, 10 4, 104, got it, will do, deal, absolutely, of course, no problem, no prob, no problema, no worries, np, count me in, im in, i am in, in, i can, i can make it, i can do it, ill be there, i will be there, be there, see you there, see ya, on my way, good, good to go, sounds good, works for me, thats fine, fine, perfect, 100',
  'si, s, see, sii, siii, sip, simon, sis, si si, sip si, claro, claro que si, por supuesto, de acuerdo, va, vale, sale, orale, dale, listo, confirmo, confirmado, confirmada, entendido, enterado, recibido, cuenta conmigo, cuenten conmigo, ahi estare, ahi estoy, ahi voy, ay estare, alli estare, alla estare, ahi nos vemos, alla nos vemos, nos vemos, acepto, puedo, si puedo, esta bien, ta bien, bueno, perfecto, no hay problema, sin problema, con gusto',
);
const NO = phrases(
  'no, n, nope, nop, noo, nooo, nah, na, naw, negative, no way, no can do, cant, can not, cannot, i cant, i cannot, i can not, cant make it, cant do it, i cant make it, i cant do it, i cannot make it, wont make it, i wont make it, wont be there, i wont be there, not able, unable, unavailable, not available, im not available, not free, im off, pass, decline, declined, sorry no, sorry cant, sorry i cant, sorry, not this time, busy, im busy, sick, im sick, i am sick',
  'nel, nel pastel, no puedo, no voy, no podre, no puedo ir, no ire, no voy a poder, no voy a ir, no podre ir, ya no puedo, hoy no, manana no, imposible, negativo, paso, rechazo, no gracias, lo siento, lo siento no puedo, perdon no puedo, estoy ocupado, estoy enfermo, no estoy disponible, no disponible, ocupado, enfermo',
);

const SPANISH = new Set(
  'si sii sip simon claro supuesto acuerdo vale sale orale dale listo confirmo confirmado confirmada entendido enterado recibido cuenta conmigo ahi alli alla estare acepto puedo esta bien bueno perfecto problema gusto nel voy podre ire hoy manana imposible negativo rechazo gracias siento perdon ocupado enfermo disponible alto basta parar pare paren detener cancelar baja salir mensajes textos lista empezar iniciar inicio comenzar alta ayuda informacion que no como donde hora cuando trabajo'.split(
    ' ',
  ),
);

/** After a first word that is a yes or a no, these leave in doubt what is meant. */
const CONDITION =
  /\b(?:but|if|unless|maybe|late|later|til|till|until|before|after|instead|only|yes|yeah|wait|which|what|who|when|where|why|how|think|hold|pero|tal vez|quiza|quizas|tarde|despues|antes|hasta|solo|si|a menos|espera|espere|cual|quien|cuando|donde|como|que)\b/;
/** After a yes, these take it back. */
const NEGATION = /\b(?:not|cant|cannot|dont|wont|isnt|no|nope|porque)\b/;
/** After a no, these turn it round: "no I can make it". */
const TURNED =
  /\b(?:problem|problema|worries|can|ill|i will|will be|puedo|voy|estare|ahi estoy|bien|good|fine|ok|sure)\b/;
/** What may follow an unaccented "si", which is also "if": "si ahi estare", but not "si me pagan". */
const AFTER_SI =
  /^(?:(?:si|sip|claro|senor|senora|patron|jefe|jefa|amigo|boss|gracias|ahi|alli|alla|ay|estare|estoy|voy|puedo|confirmo|confirmado|listo|va|vale|acepto|cuenta|cuente|cuenten|conmigo|nos|vemos|manana|hoy|por|favor|con|gusto|buenos|dias|buenas|tardes|noches|esta|bien|de|acuerdo) ?)+$/;

/** A word that says yes or no as the first of a few. */
const FIRST_YES = phrases(
  'yes, yeah, yep, yup, yea, ok, okay, sure, confirmed, simon, claro, confirmado, orale',
);
const FIRST_NO = phrases('no, nope, nah, nel, sorry, cant');
const MAX_WORDS = 8;

/**
 * What a text means, in English and Spanish, with the usual misspellings. Only what is sure counts: a question, a
 * condition ("yes but not before 8") or anything longer is `other`. STOP and its like count only as the whole text, so
 * that "stop by the gate" ends nothing.
 */
export function parseReply(text: string): ReplyKind {
  const thumb = thumbOf(text);
  if (thumb !== null) return thumb;
  const plain = fold(text);
  if (STOP.has(plain)) return 'stop';
  if (START.has(plain)) return 'start';
  if (HELP.has(plain)) return 'help';
  if (/[?¿]/.test(text)) return 'other';
  if (YES.has(plain)) return 'yes';
  if (NO.has(plain)) return 'no';
  const [first = '', ...others] = plain.split(' ');
  if (others.length === 0 || others.length >= MAX_WORDS) return 'other';
  const rest = others.join(' ');
  if (first === 'si' && AFTER_SI.test(rest)) return 'yes';
  if (FIRST_YES.has(first) || isPlainYes(text)) {
    return CONDITION.test(rest) || NEGATION.test(rest) ? 'other' : 'yes';
  }
  if (FIRST_NO.has(first)) {
    return NO.has(rest) || !(CONDITION.test(rest) || TURNED.test(rest)) ? 'no' : 'other';
  }
  return 'other';
}

/** The language that a text is written in, as far as its words tell; null: they do not. */
export function languageOfReply(text: string): Language | null {
  const words = fold(text).split(' ');
  return words.some((word) => SPANISH.has(word) && word !== 'no') ? 'es' : null;
}

/** The carriers' own words, which the provider answers by itself: a second answer would be one too many. */
export function isCarrierWord(text: string): boolean {
  return /^(?:stop|stopall|unsubscribe|cancel|end|quit|start|unstop)$/i.test(text.trim());
}

/** Opens with "sí" or "si,", which cannot be "if". */
function isPlainYes(text: string): boolean {
  return /^[\s¡"']*s(?:í|i\s*[,.!;])/i.test(text.normalize('NFC'));
}

/** A text of nothing but thumbs or ticks. */
function thumbOf(text: string): 'yes' | 'no' | null {
  const bare = text.replace(/\p{Emoji_Modifier}|\p{Variation_Selector}|\s/gu, '');
  if (/^(?:👍|✅|✔|👌)+$/u.test(bare)) return 'yes';
  return /^(?:👎|❌)+$/u.test(bare) ? 'no' : null;
}

/** Lower case without accents, apostrophes, punctuation and pictures. */
function fold(text: string): string {
  return text
    .normalize('NFD')
    .replace(/\p{M}|['’‘`´]/gu, '')
    .toLowerCase()
    .replace(/[^\p{L}\p{N}]+/gu, ' ')
    .trim();
}

function phrases(...lists: string[]): ReadonlySet<string> {
  return new Set(lists.flatMap((list) => list.split(', ')));
}
