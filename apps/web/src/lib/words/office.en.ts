/** English words of the pages that the office works with, by screen. Functions take what varies. */

import { en } from './en.ts';
import { boardWords } from './office-board.en.ts';
import { importWords } from './office-import.en.ts';
import { problemWords } from './office-problems.en.ts';
import { setUpWords } from './office-set-up.en.ts';

export const office = {
  product: 'Strikeboard',
  close: en.close,
  save: en.save,
  cancel: en.cancel,
  didNotWork: en.didNotWork,
  mayBeLeftOut: '(may be left out)',

  frame: {
    pages: 'Pages',
    board: 'Board',
    notices: 'Notices',
    import: 'Import',
    yardSheet: 'Yard sheet',
    setUp: 'Set-up',
    menu: 'Menu',
    chooseCompany: 'Choose a company',
    myPage: 'My shifts and days off',
    myWork: (name: string) => `${name}: my work`,
    signOut: en.signOut,
  },

  theme: {
    label: 'Colours',
    auto: 'As the device',
    light: 'Light',
    dark: 'Dark',
    sunlight: 'Sunlight',
  },

  ...boardWords,
  import: importWords,
  setUp: setUpWords,

  notices: {
    title: 'Notices',
    about: 'Every text and e-mail with its state and its words. The list looks for news every few seconds.',
    state: 'State',
    all: 'All',
    states: en.noticeStates,
    refresh: 'Refresh',
    failed: 'The notices could not be read.',
    loading: 'Reading the notices…',
    nothingYet:
      'Nobody has been told anything yet. People are told once a visit within the telling horizon has settled.',
    noneOf: (state: string) => `No notice is ${state.toLowerCase()}.`,
    showOlder: 'Show older',
    wayTo: (channel: keyof typeof en.channels, address: string) => `${en.channels[channel]} to ${address}`,
    tries: 'Tries',
    ownLink: '[their own link]',
    superseded: 'Not sent: a newer notice took its place.',
    interrupted: 'The provider was called and no answer came. It may have been sent.',
    notSent: (code: string | null) => `Not sent (${code}).`,
  },

  yardSheet: {
    title: 'Yard sheet',
    print: 'Print',
    sum: (yards: string, weeks: number, pours: number) =>
      `${yards} yd³ ordered in ${weeks} weeks, ${pours} pours on the board.`,
    nothing: 'No pour stands on the board in these weeks. Put one there, and its yards appear here.',
    caption: 'Yards ordered by week and crew',
    weekOf: 'Week of',
    noMore: '(no more)',
    all: 'All, yd³',
    firmOrDone: 'Firm or done',
    pencilled: 'Pencilled',
    waiting: 'Waiting',
    allWeeks: 'All weeks',
    thisWeek: 'This week',
    thisWeekMark: '· this week',
    yards: (yards: string) => `${yards} yd³`,
  },

  refused: {
    toStart: 'To the start',
    notAllowed: {
      page: 'Not allowed',
      title: 'Not for your role',
      inCompany: (company: string, role: string) =>
        `You are signed in at ${company} as ${role}, and this page is for others. Ask an owner or a dispatcher if you need it.`,
      anywhere: 'You are signed in, but this page is for others.',
      myWork: en.myWork,
    },
    notFound: {
      page: 'Not found',
      title: 'There is nothing here',
      why: 'The address is wrong, or what it names belongs to a company that you are not a member of.',
    },
    unexpected: {
      page: 'Something went wrong',
      title: 'Something went wrong here',
      why: 'A fault on our side; nothing was changed. Try again. If it stays, tell whoever runs this installation the number below.',
    },
  },
  problems: problemWords,
};
