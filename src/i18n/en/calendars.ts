import type { Calendar, CalendarDay, CalendarImport } from '#shared/contracts/calendars.ts'
import { counted, day, decimal, quantity, weekdayDay } from './format.ts'

type Uses = Pick<Calendar, 'isHospital' | 'suppliers' | 'wards'>

function usedBy(calendar: Uses): string {
  const parts = [
    calendar.isHospital ? 'the hospital' : null,
    calendar.suppliers > 0 ? counted(calendar.suppliers, 'supplier') : null,
    calendar.wards > 0 ? counted(calendar.wards, 'ward') : null,
  ].filter((part) => part !== null)
  return parts.length ? parts.join(', ') : 'nobody yet'
}

/** "half a day late", "on time": a mean delay rounded to half days. */
function delayWords(days: number): string {
  const halves = Math.round(days * 2) / 2
  if (halves === 0) return 'on time'
  const length = Math.abs(halves)
  const words = length === 0.5 ? 'half a day' : `${decimal(length)} ${length === 1 ? 'day' : 'days'}`
  return `${words} ${halves > 0 ? 'late' : 'early'}`
}

/** Calendars of closed days, and how deliveries came against them. */
export const calendarWords = {
  title: 'Calendars',
  what: 'days on which suppliers, stores or wards are closed',
  lead: 'Days on which suppliers, stores or wards are closed.',
  one: 'Calendar',
  add: 'Add a calendar',
  newTitle: 'New calendar',
  newWhat: 'Name it first. Its days are entered or read from a calendar file after that.',
  none: 'No calendar yet',
  noneWhat:
    'A calendar holds the days on which nothing is ordered, delivered or counted, such as public holidays. Without one, every week is planned as an ordinary one.',
  columns: { name: 'Name', usedBy: 'Used by', year: (year: number): string => `Days ${year}` },
  usedBy,
  usedByLead: (calendar: Uses): string => `Used by ${usedBy(calendar)}`,
  emptyYear: (year: number): string =>
    `No closed days are entered for ${year} yet. Orders would be planned as if nothing closed.`,
  emptyYearOf: (name: string, year: number): string => `${name}: ${calendarWords.emptyYear(year)}`,
  enterDays: 'Enter the days',
  year: (year: number): string => String(year),
  dayCount: (n: number): string => (n === 0 ? 'no closed days' : counted(n, 'closed day')),
  earlier: (days: number): string => `Earlier years, ${counted(days, 'day')}`,
  days: 'Closed days',
  noDays: 'No closed days yet',
  noDaysWhat: 'Enter them one by one, or read them from a calendar file.',
  day: (entry: CalendarDay): string => weekdayDay(entry.date),
  date: 'Date',
  dayName: 'What it is',
  dayNameHint: 'Such as Christmas Day. It stands beside orders planned around it.',
  addDay: 'Add the day',
  takeOut: 'Take out',
  takeOutDay: (entry: CalendarDay): string => `Take out ${day(entry.date)}${entry.name ? `, ${entry.name}` : ''}`,
  needDate: 'choose a date',
  dayKnown: (entry: CalendarDay): string =>
    `${day(entry.date)} stands there already${entry.name ? `: ${entry.name}` : ''}`,
  dayAdded: (entry: CalendarDay): string => `${day(entry.date)} added. What depends on it is worked out anew.`,
  dayTaken: (entry: CalendarDay): string => `${day(entry.date)} taken out. What depends on it is worked out anew.`,
  importTitle: 'From a calendar file',
  importWhat:
    'Most public bodies and suppliers offer their closed days as an iCalendar file, ending in .ics. Its whole days are added; nothing is taken out.',
  choose: 'Choose a file',
  tooLarge: 'The file is larger than 1 MB. Choose one that holds closed days only.',
  notRead: 'The file could not be read from this device. Choose it again.',
  imported: (file: string, result: CalendarImport): string => {
    const known = result.known > 0 ? `, ${quantity(result.known)} stood there already` : ''
    return `${file}: ${result.added === 0 ? 'no day' : counted(result.added, 'day')} added${known}.`
  },
  leftOut: (n: number): string => `${counted(n, 'entry', 'entries')} left out`,
  unnamed: 'An entry without a name',
  moreLeft: (n: number): string => `and ${quantity(n)} more`,
  name: 'Name',
  rename: 'Rename',
  renamed: 'Renamed.',
  theHospitals: 'the hospital’s',
  noCalendar: 'none: every week is an ordinary one',
  deliveriesSeen: (seen: { deliveries: number; delayDays: number | null }): string => {
    if (seen.deliveries === 0) return 'No deliveries seen yet; the stated times are used.'
    const how = seen.delayDays === null ? '' : `, ${delayWords(seen.delayDays)} on average`
    return `${counted(seen.deliveries, 'delivery', 'deliveries')} seen${how}.`
  },
} as const
