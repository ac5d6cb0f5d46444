import type { Words } from './words.ts';

/** English sentences. */
export const wordsEn: Words = {
  weekdays: ['Monday', 'Tuesday', 'Wednesday', 'Thursday', 'Friday', 'Saturday', 'Sunday'],
  months: [
    'January',
    'February',
    'March',
    'April',
    'May',
    'June',
    'July',
    'August',
    'September',
    'October',
    'November',
    'December',
  ],
  longDay: (weekday, dayOfMonth, month) => `${weekday}, ${month} ${dayOfMonth}`,
  timeOnDay: (time, day) => `${time} ${day}`,
  timeInZone: (time, zoneName) => `${time} ${zoneName}`,
  finishes: {
    float: 'float',
    broom: 'broom',
    trowel: 'trowel',
    'hard-trowel': 'hard trowel',
    exposed: 'exposed aggregate',
    stamped: 'stamped',
  },
  withFinish: (finish) => `${finish} finish`,

  smsOpening: {
    assigned: (company, day) => `${company}: ${day}.`,
    offered: (company, day) => `${company} offers you work ${day}.`,
    changed: (company, day) => `${company}: change for ${day}.`,
  },
  smsEnding: {
    'called-off': (company, { day, start, place }) =>
      `${company}: CALLED OFF. ${day}, ${start}, ${place}. Do not come.`,
    'put-off': (company, { day, start, place }) =>
      `${company}: put off. ${day}, ${start}, ${place}. Do not come then; the new day is not set.`,
    'taken-off': (company, { day, start, place }) =>
      `${company}: you are off ${day}, ${start}, ${place}. Do not come to it.`,
  },
  beThere: (time) => `Be there ${time}`,
  firstTruck: (time) => `first truck ${time}`,
  howToAnswer: (link) => `Reply YES or NO, or tap ${link}`,
  howToAnswerOrStop: (link) => `Reply YES or NO (STOP ends texts), or tap ${link}`,

  dayMoved: ({ from, to }) => `Day moved from ${from} to ${to}`,
  startMoved: ({ from, to }) => `Start moved from ${from} to ${to}`,
  firstTruckMoved: ({ from, to }) => `First truck moved from ${from} to ${to}`,
  firstTruckNow: (time) => `First truck now ${time}`,
  firstTruckGone: () => 'First truck has no time yet',
  placeChanged: ({ from, to }) => `Address is now ${to}, not ${from}`,
  amountChanged: ({ from, to }) => `Now ${to}, not ${from}`,
  finishChanged: ({ from, to }) => `Finish is now ${to}, not ${from}`,
  workChanged: ({ from, to }) => `Work is now ${to}, not ${from}`,

  mailSubject: {
    assigned: (company, { day, start, place }) => `${day}, ${start}: ${place} (${company})`,
    offered: (company, { day, start, place }) => `Work offered ${day}, ${start}: ${place} (${company})`,
    changed: (company, { day, start, place }) => `Changed: ${day}, ${start}, ${place} (${company})`,
    'called-off': (company, { day, start, place }) => `Called off: ${day}, ${start}, ${place} (${company})`,
    'put-off': (company, { day, start, place }) => `Put off: ${day}, ${start}, ${place} (${company})`,
    'taken-off': (company, { day, start, place }) => `You are off: ${day}, ${start}, ${place} (${company})`,
  },
  mailOpening: {
    assigned: (company) => `${company} has you down for this work.`,
    offered: (company) => `${company} offers you this work. It is yours once you say yes.`,
    changed: (company) => `${company} has changed work that you were told of.`,
    'called-off': (company) => `${company} has called off this work. Do not come.`,
    'put-off': (company) => `${company} has put off this work. Do not come then; the new day is not set.`,
    'taken-off': (company) => `${company} no longer has you down for this work. Do not come to it.`,
  },
  greeting: (name) => `Hello ${name},`,
  mailLabels: {
    day: 'Day',
    start: 'Be there',
    firstLoad: 'First truck',
    place: 'Where',
    concrete: 'Concrete',
    work: 'Work',
    changes: 'What changed',
  },
  mailAnswer: (link) => `Say yes or no here: ${link}`,
  safety:
    'Safety: wet concrete burns skin and eyes. Wear waterproof gloves and boots, long sleeves and eye protection. Rinse skin at once with clean water; rinse eyes for 15 minutes and see a doctor.',
  localCode:
    'Times and quantities are a plan. Building codes, permits, noise hours and the rules of the site come first: check what applies where you work.',

  replies: {
    yes: (company, { day, start, place }) =>
      `Thank you. ${company} has your YES: ${day}, ${start}, ${place}.`,
    no: (company, { day, start, place }) => `${company} has your NO: ${day}, ${start}, ${place}.`,
    notFree: (company, { day, start }) =>
      `${company}: you are not free ${day}, ${start}, so your YES was not taken. Call the office.`,
    notAsked: (company, { day, start }) =>
      `${company}: you are no longer asked for ${day}, ${start}. Nothing was changed.`,
    unclear: (company, { day, start, place }) =>
      `${company}: reply YES or NO for ${day}, ${start}, ${place}. For anything else call the office.`,
    nothingAsked: 'There is no work waiting for your answer. Call the office of your company.',
    help: 'Work times for concrete crews, sent by your company. Reply YES or NO to the last one. Reply STOP to end all texts.',
    stopped: 'No more texts will come to this number, from any company. Reply START to have them again.',
    started: 'Texts about your work will come to this number again. Reply STOP to end them.',
  },

  deliveryProblems: {
    'bad-address': 'The number or address does not exist or takes no messages.',
    'not-a-mobile': 'The number is not a mobile phone, so no text can reach it.',
    'said-stop': 'This person has said STOP. Call them.',
    unreachable: 'The phone was off or out of reach for too long.',
    filtered: 'The carrier refused the text.',
    'not-allowed-there': 'The account may not send texts to that country.',
    'sender-set-up': 'The account or the number that texts come from is not set up rightly.',
    'try-later': 'The service was busy or could not be reached; it is being tried again.',
    'gave-up': 'The service could not be reached for over an hour, so it was not sent.',
    interrupted: 'Sending was interrupted. It may or may not have arrived: ask before sending it again.',
    'no-answer': 'The service did not answer. It may or may not have arrived: ask before sending it again.',
    superseded: 'A newer message took its place before it was sent.',
    'no-link': 'The link for the answer could not be made, so it was not sent.',
    other: 'It was refused.',
  },
};
