import type { Finding } from '@strikeboard/domain/finding';
import { en } from './en.ts';
import { type FindingCatalogue, type FindingWords, type NameOf, wordFinding } from './finding-words.ts';

const uses: Readonly<Record<string, string>> = {
  foot: 'people on it',
  forms: 'stripping its forms',
  'light-vehicle': 'light vehicles',
  'full-load': 'full load',
  'adjacent-pour': 'a pour beside it',
};

const finishName = (value: unknown): string =>
  Object.entries(en.finishes)
    .find(([finish]) => finish === value)?.[1]
    .toLowerCase() ?? 'this';

export const findingsEn: FindingCatalogue = {
  and: 'and',
  codes: {
    'crew-overlap': (f) => ({
      what: Number(f.value('samePeople')) > 0 ? 'The crew is elsewhere then' : 'The crew would be split',
      why:
        Number(f.value('samePeople')) > 0
          ? `${f.all('crew') || 'The crew'} has ${f.all('visit')} at the same time, and ${f.number('samePeople', 0)} of the same people are meant.`
          : `${f.all('crew') || 'The crew'} also has ${f.all('visit')} at the same time, with other people.`,
    }),
    'person-overlap': (f) => {
      const who = f.first('person') ?? 'Someone';
      const span = `${f.moment('fromMs')} to ${f.clock('untilMs')}`;
      const travel =
        f.value('travelOnly') === true ? ' The time to drive between the two is what is missing.' : '';
      if (f.value('takenBy') === 'same-crew') {
        return {
          what: `${who} is taken`,
          why: `${who} is on ${f.first('visit') ?? 'other work'}, ${span}.${travel}`,
        };
      }
      const by =
        f.value('takenBy') === 'busy' || f.first('visit') === null
          ? `is not free, ${span}`
          : `is on ${f.first('visit')}, ${span}`;
      return { what: `${who} stays off`, why: `${who} ${by}, and would not be on this one.${travel}` };
    },
    'short-handed': (f) => ({
      what: `Short by ${Number(f.value('peopleNeeded')) - Number(f.value('peoplePresent'))}`,
      why: `${f.number('peoplePresent', 0)} people are on it and ${f.number('peopleNeeded', 0)} are needed.${
        Number(f.value('peopleOffered')) > 0
          ? ` ${f.number('peopleOffered', 0)} more are asked and have not answered.`
          : ''
      }`,
    }),
    'skill-missing': (f) => ({
      what: `Nobody who does ${finishName(f.value('finish'))} finish`,
      why: `None of the ${f.number('peoplePresent', 0)} people on it has ${finishName(f.value('finish'))} among their finishes.`,
    }),
    'set-outruns-crew': (f) => ({
      what: 'It sets before they can finish it',
      why: `${f.number('areaFt2', 0)} ft² of ${finishName(f.value('finish'))} finish at ${f.number('concreteTempF', 0)} °F needs ${f.number('peopleNeeded', 0)} finishers within a window of ${f.number('windowHours')} hours, and ${f.number('peoplePresent', 0)} are on it.`,
    }),
    'travel-gap': (f) => ({
      what: 'No time to drive',
      why:
        f.value('neighbour') === 'before'
          ? `From ${f.first('visit') ?? 'the visit before'} it is ${f.number('travelMin', 0)} minutes' drive, and there are ${f.number('gapMin', 0)}.`
          : `To ${f.first('visit') ?? 'the visit after'} it is ${f.number('travelMin', 0)} minutes' drive, and there are ${f.number('gapMin', 0)}.`,
    }),
    overtime: (f) =>
      f.value('rule') === 'week'
        ? {
            what: 'Overtime this week',
            why: `${f.all('person')} would reach ${f.number('weekHours')} hours in the week; over ${f.number('straightHours', 0)} is overtime.`,
          }
        : {
            what: 'A long shift',
            why: `${f.all('person')} would work ${f.number('shiftHours')} hours from first start to last end; your limit is ${f.number('maxShiftHours')}.`,
          },
    'rest-short': (f) => ({
      what: 'Too little rest',
      why: `${f.all('person')} would have ${f.number('restHours')} hours between two shifts; your least is ${f.number('leastRestHours')}.`,
    }),
    'plant-closed': (f) => ({
      what: `${f.first('plant') ?? 'The plant'} is closed`,
      why:
        f.value('closedThatDay') === true
          ? `It does not load trucks on ${f.day() ?? 'that day'}.`
          : `${f.number('loadsOutside', 0)} of ${f.number('loads', 0)} loads would be batched outside its hours (first ${f.clock('firstBatchMs')}, last ${f.clock('lastBatchMs')}, site time).`,
    }),
    'plant-over-capacity': (f) => ({
      what: `${f.first('plant') ?? 'The plant'} has no such rate left`,
      why: `With ${f.number('otherOrders', 0)} other orders it would make ${f.number('peakYd3PerHour')} yd³ in an hour; it makes ${f.number('maxYd3PerHour')} at most.`,
    }),
    'mix-not-carried': (f) =>
      f.value('mix') === null
        ? { what: 'No mix chosen', why: 'Without a mix nothing can be ordered from a plant.' }
        : {
            what: 'The plant does not carry the mix',
            why: `${f.first('plant') ?? 'The plant'} has no ${f.value('mix')}.`,
          },
    'spacing-cold-joint': (f) => ({
      what: 'Trucks too far apart',
      why: `A truck every ${f.number('spacingMin')} minutes; at ${f.number('concreteTempF', 0)} °F the placed edge knits for ${f.number('limitMin')}.`,
    }),
    'discharge-late': (f) => ({
      what: 'Concrete too old at discharge',
      why: `The last of a load would be ${f.number('ageMin', 0)} minutes old (haul ${f.number('haulMin', 0)}, wait ${f.number('waitMin', 0)}); the limit is ${f.number('limitMin', 0)}.`,
    }),
    'short-load': (f) => ({
      what: 'A short load',
      why: `The last load is ${f.number('lastLoadYd3', 2)} yd³; under ${f.number('shortLoadYd3', 2)} ${f.first('plant') ?? 'the plant'} charges for it.`,
    }),
    'pump-overlap': (f) =>
      f.value('pumpName') === undefined
        ? {
            what: Number(f.value('pumpsThatSuit')) === 0 ? 'No pump for it' : 'No pump is free',
            why:
              Number(f.value('pumpsThatSuit')) === 0
                ? 'The company has no pump that suits this placing method.'
                : `All pumps that suit it are taken: ${f.all('equipment')}.`,
          }
        : {
            what: `${f.value('pumpName')} is taken`,
            why: `It is held for ${f.first('visit') ?? 'another pour'} until ${f.moment('takenUntilMs')}; this one needs it from ${f.clock('heldFromMs')}, travel and set-up included.`,
          },
    'pump-reach': (f) => ({
      what: 'The pump does not reach',
      why: `${f.first('equipment') ?? 'The pump'} reaches ${f.number('reachFt', 0)} ft; ${f.number('neededFt', 0)} are needed.`,
    }),
    'pump-slower-than-trucks': (f) => ({
      what: 'The pump is slower than the trucks',
      why: `${f.value('pumpName')} gives ${f.number('outputYd3PerHour')} yd³/h and the trucks bring ${f.number('placingRateYd3PerHour')}.`,
    }),
    'cure-blackout': (f) => ({
      what: 'The slab is too green',
      why: `${f.first('visit') ?? 'The slab'} would be ${f.number('ageHours')} hours old; ${uses[String(f.value('use'))] ?? 'this use'} needs ${f.number('releaseHours')} (until ${f.moment('releasedMs')}).`,
    }),
    'adjacent-green': (f) => ({
      what: 'Beside a green slab',
      why: `${f.first('visit') ?? 'The slab beside it'} would be ${f.number('ageHours')} hours old; placing beside it needs ${f.number('releaseHours')} (until ${f.moment('releasedMs')}).`,
    }),
    'site-hours': (f) => ({
      what:
        f.value('what') === 'placing' ? 'Outside the site’s hours' : 'The crew is there outside the hours',
      why: `${f.value('what') === 'placing' ? 'Placing' : 'The crew'} would run ${f.moment('fromMs')} to ${f.clock('untilMs')}; permitted is ${minuteText(f.value('permittedFromMin'))} to ${minuteText(f.value('permittedUntilMin'))}.`,
    }),
    'not-ready': (f) => ({
      what: `${f.number('itemsUndone', 0)} of ${f.number('items', 0)} not ready`,
      why: `The list still has open items, ${f.number('hoursToStart', 0)} hours before the start.`,
    }),
    'after-dark': (f) => ({
      what: 'Finishing in the dark',
      why: `Finishing runs ${f.clock('finishingFromMs')} to ${f.clock('finishingUntilMs')}; light lasts ${f.clock('civilDawnMs')} to ${f.clock('civilDuskMs')}.`,
    }),
    freezing: (f) => ({
      what: 'Cold',
      why: `${f.number('airTempF', 0)} °F is forecast for ${f.moment('atMs')}; under ${f.number('limitF', 0)} °F the slab needs protection for ${f.number('protectionHours', 0)} hours.`,
    }),
    'hot-mix': (f) => ({
      what: 'Hot concrete',
      why: `The concrete would be ${f.number('concreteTempF', 0)} °F; the limit is ${f.number('limitF', 0)}.`,
    }),
    'evaporation-high': (f) => ({
      what: 'Drying fast',
      why: `${f.number('evaporationLbPerFt2H', 2)} lb/ft²/h evaporate at ${f.moment('atMs')} (${f.number('airTempF', 0)} °F, ${f.number('humidityPercent', 0)} %, wind ${f.number('windMph', 0)} mph); from ${f.number('actionLbPerFt2H', 1)} on something must be done.`,
    }),
    'rain-likely': (f) => ({
      what: 'Rain likely',
      why: `${f.number('rainChancePercent', 0)} % at ${f.moment('atMs')}; the surface is open until ${f.clock('finalSetMs')}.`,
    }),
    'wind-boom': (f) => ({
      what: 'Too windy for the boom',
      why: `${f.number('windMph', 0)} mph is forecast for ${f.moment('atMs')}; booms are folded from ${f.number('limitMph', 0)}.`,
    }),
    lightning: (f) => ({
      what: 'Lightning',
      why: `Thunderstorms are forecast${f.day() ? ` for ${f.day()}` : ''}.`,
    }),
    'heat-stress': (f) => ({
      what: 'Heat',
      why: `The heat index reaches ${f.number('heatIndexF', 0)} °F; plan shade, water and breaks.`,
    }),
    'follow-up-unmanned': (f) =>
      f.value('startsMs') === undefined
        ? {
            what: 'Nobody to saw it',
            why: `The joints are to be sawn ${f.moment('windowFromMs')} to ${f.clock('windowUntilMs')}, and ${f.value('standsOutside') === true ? 'the saw visit stands outside that time' : 'no saw visit stands on the board'}.`,
          }
        : {
            what: 'Outside the saw window',
            why: `The joints are to be sawn ${f.moment('windowFromMs')} to ${f.clock('windowUntilMs')}; this starts ${f.moment('startsMs')}.`,
          },
  },
  clears: {
    'more-people': ({ people }) => (people === 1 ? 'One more person' : `${people} more people`),
    'placing-rate-under': ({ yd3PerHour }, print) => `Place at most ${print.number(yd3PerHour)} yd³/h`,
    'start-by': ({ atMs }, print) => `Start by ${print.moment(atMs)}`,
    'start-after': ({ atMs }, print) => `Start at ${print.moment(atMs)} or later`,
    'other-crew': () => 'Another crew',
    'other-pump': () => 'Another pump',
    'other-plant': () => 'Another plant',
    'choose-mix': () => 'Choose a mix',
    'spacing-under': ({ minutes }, print) => `A truck every ${print.number(minutes)} minutes or oftener`,
    'spacing-over': ({ minutes }, print) => `Trucks at least ${print.number(minutes)} minutes apart`,
    'order-at-least': ({ yd3 }, print) => `Order at least ${print.number(yd3, 2)} yd³`,
    'man-follow-up': ({ window }, print) =>
      `Put a saw visit between ${print.moment(window.startMs)} and ${print.moment(window.endMs)}`,
    'make-ready': ({ items }) => `Make ready: ${items.join(', ')}`,
  },
};

function minuteText(value: unknown): string {
  if (typeof value !== 'number') return 'any time';
  const hour = Math.floor(value / 60) % 24;
  return `${hour % 12 === 0 ? 12 : hour % 12}:${String(value % 60).padStart(2, '0')} ${hour < 12 ? 'AM' : 'PM'}`;
}

/** A finding in English. `zone` is the site's. */
export function wordsOfFinding(finding: Finding, names: NameOf, zone: string): FindingWords {
  return wordFinding(findingsEn, 'en', { finding, names, zone });
}
