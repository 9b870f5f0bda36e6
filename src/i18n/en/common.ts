import type { Role } from '#shared/contracts/contract.ts'
import type { Room, Ward } from '#shared/contracts/catalogue.ts'
import type { Hospital } from '#shared/contracts/hospital.ts'

export const commonWords = {
  product: 'Brimline',
  close: 'Close',
  cancel: 'Cancel',
  save: 'Save',
  back: 'Back',
  loading: 'Loading …',
  search: 'Search',
  clear: 'Clear',
  showAsTable: 'Show as table',
  showAsPicture: 'Show as picture',
  more: 'More',
  skip: 'Skip to the page',
  oneLess: (what: string): string => `One less: ${what}`,
  oneMore: (what: string): string => `One more: ${what}`,
  yes: 'yes',
  no: 'no',
  none: 'none',
  saved: 'Saved.',
  pageOf: (page: number, pages: number): string => `Page ${page} of ${pages}`,
  previousPage: 'Previous page',
  nextPage: 'Next page',
} as const

export const roleWords: Record<Role, string> = {
  nurse: 'Ward staff',
  coordinator: 'Coordinator',
  reviewer: 'Reviewer',
  administrator: 'Administrator',
}

export const vedWords = { V: 'vital', E: 'essential', D: 'desirable' } as const

export const wardKindWords: Record<Ward['kind'], string> = {
  general: 'General ward',
  intensive: 'Intensive care',
  theatre: 'Theatre',
  emergency: 'Emergency',
  children: 'Children',
  maternity: 'Maternity',
  outpatient: 'Outpatient',
  stores: 'Stores',
}

export const roomModeWords: Record<Room['mode'], { label: string; hint: string }> = {
  'as-before': { label: 'as before', hint: 'The levels people entered are used; nothing is shown beside them.' },
  beside: { label: 'beside', hint: 'The entered levels are used; what is worked out stands beside them.' },
  calculated: { label: 'calculated', hint: 'What is worked out is used.' },
}

/** The hospital's own noun for a bin, in one and in many. */
export const binWord = (word: Hospital['binWord'] | undefined, count = 1): string => {
  const one = word ?? 'bin'
  return count === 1 ? one : `${one}s`
}

export const cautionWords = {
  signal: { warning: 'Warning', caution: 'Caution', notice: 'Notice' },
  policyLink: 'Supply policy',
  more: (count: number): string => (count === 1 ? '1 more notice below.' : `${count} more notices below.`),
  vitalBelow:
    'This item is marked vital and is below its reorder point. Raise an order now, and if it may be needed before delivery, phone as your facility’s procedure says.',
  vitalEmpty: 'None counted here. Do not wait for this program: use your facility’s emergency supply route now.',
  vitalBelowWard: (phone: string): string =>
    `This item is marked vital and is running low. If it may be needed before a delivery, phone ${phone ? phone : 'your coordinator'} as your facility’s procedure says.`,
  estimate:
    'This level is an estimate from past counts and deliveries. It does not know today’s patients, an outbreak or a new procedure. Your judgement and facility policy come first.',
  oldCount: (days: number): string =>
    `Last counted ${days} days ago. The shelf may differ. Look before you rely on it.`,
  disagree: 'The records of this place disagree. Count it.',
  noPatients: 'Do not enter patient names, numbers or dates of birth.',
} as const
