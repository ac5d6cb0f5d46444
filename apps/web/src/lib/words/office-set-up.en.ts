/** English words of the set-up pages. Fields are named as their forms name them. */

import { en } from './en.ts';

const name = { label: 'Name' };
const longitude = { label: 'Longitude' };
const zone = { label: 'Time zone' };

const equipmentKinds = {
  pump: 'Pump',
  'laser-screed': 'Laser screed',
  'ride-on-trowel': 'Ride-on trowel',
  saw: 'Saw',
  blankets: 'Blankets',
  other: 'Other',
};

export const setUpWords = {
  title: 'Set-up',
  notRightYet: 'Some of it is not right yet.',
  saved: en.saved,
  add: (one: string) => `Add a ${one}`,
  change: (one: string) => `Change this ${one}`,
  confirmEnd: (endWord: string) => `${endWord}? What is planned stays; it is offered for new work no more.`,
  noneYet: { before: 'None yet. Add them here, or bring a spreadsheet in under', link: 'Import' },
  none: 'None',
  choose: 'Choose',
  weekDays: ['Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat', 'Sun'],
  firstLoad: (day: string) => `${day}, first load`,
  lastLoad: (day: string) => `${day}, last load`,

  people: {
    title: 'People',
    one: 'person',
    about:
      'Everyone who works for you, and the office. A sub who works for others too is one person everywhere.',
    headings: ['Name', 'Role', 'Crew', 'Phone', 'E-mail', 'Reads'],
    endWord: 'Has left',
    fields: {
      name,
      role: { label: 'Role' },
      phoneE164: { label: 'Phone', hint: 'Texts go here.' },
      email: { label: 'E-mail' },
      language: { label: 'Reads' },
      skills: { label: 'Finishes they can do', hint: 'None ticked means any.' },
    },
    languages: { en: 'English', es: 'Spanish' },
    ownersOnly: 'Only an owner says who is owner and who is dispatcher.',
  },

  crews: {
    title: 'Crews',
    one: 'crew',
    about: 'Each crew is a lane of the board. Who is on it from now on is on its next visits.',
    headings: ['Crew', 'Foreman', 'People'],
    endWord: 'Close the lane',
    fields: {
      name,
      foremanId: { label: 'Foreman' },
      memberIds: { label: 'On the crew from now on' },
    },
  },

  sites: {
    title: 'Sites',
    one: 'site',
    about: 'Where concrete goes.',
    headings: ['Site', 'Address', 'Customer', 'Permitted', 'Time zone'],
    endWord: 'Close the site',
    fields: {
      name,
      customerName: { label: 'Customer' },
      address: { label: 'Address', hint: 'Street, town, state, zip: as crews will look for it.' },
      zone,
      latDeg: { label: 'Latitude', hint: 'With it the drive and the daylight are known.' },
      lonDeg: longitude,
      permittedFromMin: { label: 'Concrete permitted from' },
      permittedUntilMin: { label: 'until', hint: 'Earlier than from: until the next day.' },
      accessNotes: { label: 'Access', hint: 'Gates, dogs, where trucks enter. Crews read it.' },
    },
  },

  plants: {
    title: 'Plants',
    one: 'plant',
    about: 'Ready-mix plants that you order from, with their hours and what they can make.',
    headings: ['Plant', 'Hours', 'yd³/h', 'Short load', 'Order desk'],
    endWord: 'Use no more',
    fields: {
      name,
      zone,
      hours: { label: 'First and last load', hint: 'A day without times is closed.' },
      closedDays: { label: 'Closed on', hint: 'Holidays as YYYY-MM-DD, one per line.' },
      maxYd3PerHour: { label: 'Most yd³ per hour' },
      shortLoadYd3: { label: 'Short load under, yd³' },
      orderStepYd3: { label: 'Orders in steps of, yd³' },
      latDeg: { label: 'Latitude', hint: 'With it the haul is known.' },
      lonDeg: longitude,
      orderPhoneE164: { label: 'Order desk, phone' },
      orderEmail: { label: 'Order desk, e-mail' },
    },
    bothTimes: 'Expected both times of a day, or neither.',
  },

  mixes: {
    title: 'Mixes',
    one: 'mix',
    about: 'What each plant carries, by the code you order it with.',
    headings: ['Code', 'Name', 'Plant', 'Strength', 'Slump', 'Discharge within'],
    endWord: 'Carried no more',
    fields: {
      code: { label: 'Code', hint: 'As the plant calls it.' },
      name,
      plantId: { label: 'Plant', hint: 'A mix stays with its plant.' },
      cement: { label: 'Cement' },
      strengthPsi: { label: 'Strength, psi' },
      slumpIn: { label: 'Slump, in' },
      dischargeLimitMin: { label: 'Discharge within, minutes', hint: "Blank: the company's rule." },
    },
    cements: { 'type-i': 'Type I', 'type-ii': 'Type II', 'type-iii': 'Type III (high early)' },
  },

  equipment: {
    title: 'Pumps and equipment',
    one: 'piece',
    about: 'What you own or hire few of. A piece is on one visit at a time, travel and wash-out included.',
    headings: ['Name', 'Kind', 'Reach', 'Output', 'Travel, set-up, wash-out', 'Operator'],
    endWord: 'Use no more',
    fields: {
      name,
      kind: { label: 'Kind' },
      boom: { label: 'It is a boom pump', hint: 'Unticked, a pump is a line pump.' },
      reachFt: { label: 'Reach, ft' },
      outputYd3PerHour: { label: 'Output, yd³/h' },
      travelMin: { label: 'Travel, minutes' },
      setUpMin: { label: 'Set-up, minutes' },
      washOutMin: { label: 'Wash-out, minutes' },
      operatorPhoneE164: { label: 'Operator, phone' },
      operatorEmail: { label: 'Operator, e-mail' },
    },
    kinds: equipmentKinds,
    boomPump: 'Boom pump',
    linePump: 'Line pump',
  },
};
