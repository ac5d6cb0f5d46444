import { describe, expect, it } from 'vitest';
import { isCarrierWord, languageOfReply, parseReply } from './reply.ts';

const list = (text: string) => text.split('|').map((part) => part.trim());

describe('what a text means', () => {
  // STOP STOPALL UNSUBSCRIBE CANCEL END QUIT; START UNSTOP; HELP INFO: carriers' words as the provider documents them
  // (published). "stop, quit, end, revoke, opt out, cancel, unsubscribe": 47 CFR 64.1200(a)(10) (published).
  // ARRET OPT-OUT OPTOUT REMOVE TD: a cloud vendor's documentation (published).
  it.each(
    list(
      'STOP|Stop|stop.|STOPALL|Unsubscribe|CANCEL|END|quit|revoke|opt out|OPT-OUT|OPTOUT|ARRET|Arrêt|REMOVE|TD|"STOP"|  stop  \n',
    ),
  )('ends texts: %s', (text) => expect(parseReply(text)).toBe('stop'));

  // "any reasonable wording", 47 CFR 64.1200(a)(10) (published); which ones: common practice, no source.
  it.each(
    list(
      'Stop texting me|please stop!|Don’t text me|dont text me anymore|remove me from your list|no more texts|ALTO|basta|Baja|no más mensajes|No me manden mensajes|ya no me manden más mensajes|stopp',
    ),
  )('ends texts in other words: %s', (text) => expect(parseReply(text)).toBe('stop'));

  it.each(
    list(
      'stop by the gate|I will stop at the plant first|end of the street?|the pump can’t stop there|bus stop on Elm|cancel the second truck|quit at 3 yesterday|para mañana|basta con dos camiones',
    ),
  )('ends nothing: %s', (text) => expect(parseReply(text)).not.toBe('stop'));

  it.each(list('START|unstop|Start!|alta|empezar'))('starts texts: %s', (text) =>
    expect(parseReply(text)).toBe('start'),
  );

  it.each(list('HELP|info|Ayuda|información'))('asks for help: %s', (text) =>
    expect(parseReply(text)).toBe('help'),
  );

  // From here on: common practice, no source.
  it.each(
    list(
      'YES|yes|Y|y|yep|Yup!|yeah|yess|yse|ye|ok|OK 👍|k|okay|Sure|confirmed|copy|10-4|will do|no problem|No worries|I’ll be there|yes sir|Yes, see you at 6:30|ok boss see you there|si|Sí|SÍ.|sii|simon|Simón|s|claro|Claro que sí|vale|órale|sale|confirmado|ahí estaré|si ahi estare|Sí, patrón|Si, gracias|si señor|Sí trabajo mañana|no hay problema|sin problema|puedo|👍|👍🏽|✅|👍👍',
    ),
  )('is yes: %s', (text) => expect(parseReply(text)).toBe('yes'));

  it.each(
    list(
      'NO|no|No.|N|nope|nah|nel|Nel pastel|can’t|cant make it|I can’t make it|Can not|no way|sorry can’t|no sir|no gracias|no puedo|No puedo ir|no, no puedo|No, I’m sick|no voy a poder|ya no puedo|lo siento|nop|👎|❌|no not tomorrow|no porque estoy enfermo',
    ),
  )('is no: %s', (text) => expect(parseReply(text)).toBe('no'));

  it.each(
    list(
      'yes but not before 8|yes?|ok what time?|¿a qué hora?|si puedo llego tarde|si me pagan|si llueve|Sí, si no llueve|maybe|not sure|I think so|no I can make it|no, estaré ahí|where is it|Who is on the crew|sí pero más tarde|yes if it does not rain|running late|ok no|yes no|no yes|asdf|¿?|…|1|Liked “Cedar Flat: Tue Dec 8”|yes to the first but which gate do we use for the second one',
    ),
  )('is neither: %s', (text) => expect(parseReply(text)).toBe('other'));

  it('is nothing when empty', () => {
    for (const text of ['', ' ', '\n', '!!!', '\u200B']) expect(parseReply(text)).toBe('other');
  });
});

it('tells Spanish by its words', () => {
  expect(languageOfReply('Sí, ahí estaré')).toBe('es');
  expect(languageOfReply('ALTO')).toBe('es');
  expect(languageOfReply('no')).toBeNull();
  expect(languageOfReply('yes')).toBeNull();
});

it('knows the words that the provider answers by itself', () => {
  expect(isCarrierWord(' Stop ')).toBe(true);
  expect(isCarrierWord('stop texting me')).toBe(false);
});
