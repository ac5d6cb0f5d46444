import type { Finding } from '@strikeboard/domain/finding';
import { es } from './es.ts';
import { type FindingCatalogue, type FindingWords, type NameOf, wordFinding } from './finding-words.ts';

const uses: Readonly<Record<string, string>> = {
  foot: 'pisarla',
  forms: 'quitar sus moldes',
  'light-vehicle': 'vehículos ligeros',
  'full-load': 'carga completa',
  'adjacent-pour': 'colar al lado',
};

const finishName = (value: unknown): string =>
  Object.entries(es.finishes)
    .find(([finish]) => finish === value)?.[1]
    .toLowerCase() ?? 'este';

export const findingsEs: FindingCatalogue = {
  and: 'y',
  codes: {
    'crew-overlap': (f) => ({
      what:
        Number(f.value('samePeople')) > 0
          ? 'La cuadrilla está en otra parte'
          : 'La cuadrilla quedaría dividida',
      why: `${f.all('crew') || 'La cuadrilla'} tiene ${f.all('visit')} a la misma hora${
        Number(f.value('samePeople')) > 0
          ? `, con ${f.number('samePeople', 0)} de las mismas personas`
          : ', con otras personas'
      }.`,
    }),
    'person-overlap': (f) => {
      const who = f.first('person') ?? 'Alguien';
      const span = `${f.moment('fromMs')} a ${f.clock('untilMs')}`;
      const travel =
        f.value('travelOnly') === true ? ' Falta el tiempo para manejar de un lugar al otro.' : '';
      const taken =
        f.first('visit') === null ? `no está libre, ${span}` : `está en ${f.first('visit')}, ${span}`;
      return f.value('takenBy') === 'same-crew'
        ? { what: `${who} está ocupado`, why: `${who} ${taken}.${travel}` }
        : { what: `${who} no va`, why: `${who} ${taken}, y no iría a este.${travel}` };
    },
    'short-handed': (f) => ({
      what: `Falta gente: ${Number(f.value('peopleNeeded')) - Number(f.value('peoplePresent'))}`,
      why: `Hay ${f.number('peoplePresent', 0)} y se necesitan ${f.number('peopleNeeded', 0)}.${
        Number(f.value('peopleOffered')) > 0
          ? ` A ${f.number('peopleOffered', 0)} más se les preguntó y no han contestado.`
          : ''
      }`,
    }),
    'skill-missing': (f) => ({
      what: `Nadie hace acabado ${finishName(f.value('finish'))}`,
      why: `De los ${f.number('peoplePresent', 0)} que van, ninguno hace ${finishName(f.value('finish'))}.`,
    }),
    'set-outruns-crew': (f) => ({
      what: 'Fragua antes de que lo acaben',
      why: `${f.number('areaFt2', 0)} ft² de ${finishName(f.value('finish'))} a ${f.number('concreteTempF', 0)} °F piden ${f.number('peopleNeeded', 0)} acabadores en ${f.number('windowHours')} horas, y van ${f.number('peoplePresent', 0)}.`,
    }),
    'travel-gap': (f) => ({
      what: 'No alcanza el tiempo de manejo',
      why: `${f.value('neighbour') === 'before' ? 'Desde' : 'Hasta'} ${f.first('visit') ?? 'el otro trabajo'} son ${f.number('travelMin', 0)} minutos y hay ${f.number('gapMin', 0)}.`,
    }),
    overtime: (f) =>
      f.value('rule') === 'week'
        ? {
            what: 'Tiempo extra esta semana',
            why: `${f.all('person')}: ${f.number('weekHours')} horas en la semana; más de ${f.number('straightHours', 0)} es tiempo extra.`,
          }
        : {
            what: 'Turno largo',
            why: `${f.all('person')}: ${f.number('shiftHours')} horas de principio a fin; el límite es ${f.number('maxShiftHours')}.`,
          },
    'rest-short': (f) => ({
      what: 'Poco descanso',
      why: `${f.all('person')}: ${f.number('restHours')} horas entre turnos; lo mínimo es ${f.number('leastRestHours')}.`,
    }),
    'plant-closed': (f) => ({
      what: `${f.first('plant') ?? 'La planta'} está cerrada`,
      why:
        f.value('closedThatDay') === true
          ? `No carga camiones el ${f.day() ?? 'ese día'}.`
          : `${f.number('loadsOutside', 0)} de ${f.number('loads', 0)} cargas saldrían fuera de su horario (primera ${f.clock('firstBatchMs')}, última ${f.clock('lastBatchMs')}).`,
    }),
    'plant-over-capacity': (f) => ({
      what: `${f.first('plant') ?? 'La planta'} no da para tanto`,
      why: `Con ${f.number('otherOrders', 0)} pedidos más haría ${f.number('peakYd3PerHour')} yd³ en una hora; hace ${f.number('maxYd3PerHour')} a lo más.`,
    }),
    'mix-not-carried': (f) =>
      f.value('mix') === null
        ? { what: 'Sin mezcla', why: 'Sin mezcla no se puede pedir nada a una planta.' }
        : {
            what: 'La planta no tiene la mezcla',
            why: `${f.first('plant') ?? 'La planta'} no tiene ${f.value('mix')}.`,
          },
    'spacing-cold-joint': (f) => ({
      what: 'Camiones muy separados',
      why: `Un camión cada ${f.number('spacingMin')} minutos; a ${f.number('concreteTempF', 0)} °F la orilla pega por ${f.number('limitMin')}.`,
    }),
    'discharge-late': (f) => ({
      what: 'Concreto viejo al descargar',
      why: `Lo último de una carga tendría ${f.number('ageMin', 0)} minutos (viaje ${f.number('haulMin', 0)}, espera ${f.number('waitMin', 0)}); el límite es ${f.number('limitMin', 0)}.`,
    }),
    'short-load': (f) => ({
      what: 'Carga corta',
      why: `La última carga es de ${f.number('lastLoadYd3', 2)} yd³; con menos de ${f.number('shortLoadYd3', 2)} ${f.first('plant') ?? 'la planta'} cobra extra.`,
    }),
    'pump-overlap': (f) =>
      f.value('pumpName') === undefined
        ? {
            what: 'No hay bomba libre',
            why:
              Number(f.value('pumpsThatSuit')) === 0
                ? 'La compañía no tiene bomba para este método.'
                : `Todas las que sirven están ocupadas: ${f.all('equipment')}.`,
          }
        : {
            what: `${f.value('pumpName')} está ocupada`,
            why: `Está en ${f.first('visit') ?? 'otro colado'} hasta ${f.moment('takenUntilMs')}; este la necesita desde ${f.clock('heldFromMs')}.`,
          },
    'pump-reach': (f) => ({
      what: 'La bomba no alcanza',
      why: `${f.first('equipment') ?? 'La bomba'} alcanza ${f.number('reachFt', 0)} ft; se necesitan ${f.number('neededFt', 0)}.`,
    }),
    'pump-slower-than-trucks': (f) => ({
      what: 'La bomba es más lenta que los camiones',
      why: `${f.value('pumpName')} da ${f.number('outputYd3PerHour')} yd³/h y los camiones traen ${f.number('placingRateYd3PerHour')}.`,
    }),
    'cure-blackout': (f) => ({
      what: 'La losa está verde',
      why: `${f.first('visit') ?? 'La losa'} tendría ${f.number('ageHours')} horas; ${uses[String(f.value('use'))] ?? 'este uso'} pide ${f.number('releaseHours')} (hasta ${f.moment('releasedMs')}).`,
    }),
    'adjacent-green': (f) => ({
      what: 'Junto a una losa verde',
      why: `${f.first('visit') ?? 'La losa de al lado'} tendría ${f.number('ageHours')} horas; colar al lado pide ${f.number('releaseHours')} (hasta ${f.moment('releasedMs')}).`,
    }),
    'site-hours': (f) => ({
      what: 'Fuera del horario de la obra',
      why: `${f.value('what') === 'placing' ? 'El colado' : 'La cuadrilla'}: ${f.moment('fromMs')} a ${f.clock('untilMs')}; se permite de ${minuteText(f.value('permittedFromMin'))} a ${minuteText(f.value('permittedUntilMin'))}.`,
    }),
    'not-ready': (f) => ({
      what: `Faltan ${f.number('itemsUndone', 0)} de ${f.number('items', 0)}`,
      why: `La lista tiene pendientes a ${f.number('hoursToStart', 0)} horas de empezar.`,
    }),
    'after-dark': (f) => ({
      what: 'Acabar a oscuras',
      why: `El acabado va de ${f.clock('finishingFromMs')} a ${f.clock('finishingUntilMs')}; hay luz de ${f.clock('civilDawnMs')} a ${f.clock('civilDuskMs')}.`,
    }),
    freezing: (f) => ({
      what: 'Frío',
      why: `Se esperan ${f.number('airTempF', 0)} °F: ${f.moment('atMs')}; bajo ${f.number('limitF', 0)} °F la losa se protege ${f.number('protectionHours', 0)} horas.`,
    }),
    'hot-mix': (f) => ({
      what: 'Concreto caliente',
      why: `El concreto estaría a ${f.number('concreteTempF', 0)} °F; el límite es ${f.number('limitF', 0)}.`,
    }),
    'evaporation-high': (f) => ({
      what: 'Se seca rápido',
      why: `Se evaporan ${f.number('evaporationLbPerFt2H', 2)} lb/ft²/h: ${f.moment('atMs')} (${f.number('airTempF', 0)} °F, ${f.number('humidityPercent', 0)} %, viento ${f.number('windMph', 0)} mph); desde ${f.number('actionLbPerFt2H', 1)} hay que actuar.`,
    }),
    'rain-likely': (f) => ({
      what: 'Lluvia probable',
      why: `${f.number('rainChancePercent', 0)} %: ${f.moment('atMs')}; la superficie está abierta hasta las ${f.clock('finalSetMs')}.`,
    }),
    'wind-boom': (f) => ({
      what: 'Mucho viento para la pluma',
      why: `Se esperan ${f.number('windMph', 0)} mph: ${f.moment('atMs')}; desde ${f.number('limitMph', 0)} se guarda la pluma.`,
    }),
    lightning: (f) => ({ what: 'Rayos', why: `Se esperan tormentas${f.day() ? `: ${f.day()}` : ''}.` }),
    'heat-stress': (f) => ({
      what: 'Calor',
      why: `El índice de calor llega a ${f.number('heatIndexF', 0)} °F; sombra, agua y descansos.`,
    }),
    'follow-up-unmanned': (f) => ({
      what: f.value('startsMs') === undefined ? 'Nadie para cortar juntas' : 'Fuera del tiempo de corte',
      why: `Las juntas se cortan ${f.moment('windowFromMs')} a ${f.clock('windowUntilMs')}.`,
    }),
  },
  clears: {
    'more-people': ({ people }) => (people === 1 ? 'Una persona más' : `${people} personas más`),
    'placing-rate-under': ({ yd3PerHour }, print) => `Colar a lo más ${print.number(yd3PerHour)} yd³/h`,
    'start-by': ({ atMs }, print) => `Empezar a más tardar ${print.moment(atMs)}`,
    'start-after': ({ atMs }, print) => `Empezar ${print.moment(atMs)} o después`,
    'other-crew': () => 'Otra cuadrilla',
    'other-pump': () => 'Otra bomba',
    'other-plant': () => 'Otra planta',
    'choose-mix': () => 'Elegir una mezcla',
    'spacing-under': ({ minutes }, print) => `Un camión cada ${print.number(minutes)} minutos o menos`,
    'spacing-over': ({ minutes }, print) => `Camiones con ${print.number(minutes)} minutos o más entre ellos`,
    'order-at-least': ({ yd3 }, print) => `Pedir al menos ${print.number(yd3, 2)} yd³`,
    'man-follow-up': ({ window }, print) =>
      `Poner el corte entre ${print.moment(window.startMs)} y ${print.moment(window.endMs)}`,
    'make-ready': ({ items }) => `Preparar: ${items.join(', ')}`,
  },
};

function minuteText(value: unknown): string {
  if (typeof value !== 'number') return 'cualquier hora';
  return `${Math.floor(value / 60) % 24}:${String(value % 60).padStart(2, '0')}`;
}

/** A finding in Spanish. `zone` is the site's. */
export function wordsOfFinding(finding: Finding, names: NameOf, zone: string): FindingWords {
  return wordFinding(findingsEs, 'es', { finding, names, zone });
}
