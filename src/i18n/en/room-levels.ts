import type { RoomMode } from '#shared/contracts/catalogue.ts'
import type { RoomLevelRow, RoomLevels } from '#shared/contracts/room-levels.ts'
import { counted, quantity, signed } from './format.ts'

interface Mode {
  label: string
  what: string
  /** On the button. */
  act: string
}

const modes: Record<RoomMode, Mode> = {
  'as-before': {
    label: 'As before',
    what: 'By the levels people entered. Nothing is shown beside them.',
    act: 'Keep it as before',
  },
  beside: {
    label: 'Side by side',
    what: 'By the levels people entered. What is worked out from counts stands beside them.',
    act: 'Show both side by side',
  },
  calculated: {
    label: 'By what is worked out',
    what: 'By what is worked out from counts and the aim of each item. It is an estimate.',
    act: 'Keep it by what is worked out',
  },
}

/** How a room is kept, and what another way would move. */
export const roomLevelWords = {
  open: 'How it is kept',
  title: (room: string): string => `How ${room} is kept`,
  modes,
  now: 'now',
  moves: (levels: RoomLevels): string => {
    if (levels.places === 0) return 'No place has a calculation yet: nothing would move.'
    const same = levels.places - levels.rise - levels.fall
    const parts = [
      levels.rise > 0 ? `${quantity(levels.rise)} would rise` : null,
      levels.fall > 0 ? `${quantity(levels.fall)} would fall` : null,
      same > 0 ? `${quantity(same)} would stay` : null,
    ].filter((part) => part !== null)
    return `Of ${counted(levels.places, 'place')} with a calculation ${parts.join(', ')}.`
  },
  vital: (n: number, mine: boolean): string =>
    mine
      ? `${counted(n, 'vital place')} ${n === 1 ? 'follows' : 'follow'} too: with this you agree to ${n === 1 ? 'it' : 'them'}.`
      : `${counted(n, 'vital place')} ${n === 1 ? 'keeps' : 'keep'} what was entered until the reviewer agrees.`,
  entered: (n: number): string =>
    `${counted(n, 'place')} ${n === 1 ? 'has' : 'have'} nothing to work out from yet: what was entered stays.`,
  back: 'What people entered holds again, where it was entered.',
  differ: 'Where they differ most',
  line: 'as entered',
  fromTo: (row: RoomLevelRow): string =>
    `${row.entered === null ? 'none' : quantity(row.entered)} → ${quantity(row.calculated)}`,
  fromToSaid: (row: RoomLevelRow): string =>
    `${row.entered === null ? 'nothing entered' : `entered ${quantity(row.entered)}`}, worked out ${quantity(row.calculated)}`,
  difference: (row: RoomLevelRow): string => {
    if (row.entered === null) return 'nothing entered'
    return row.difference === 0 ? 'the same' : signed(row.difference)
  },
  waits: 'waits for the reviewer',
  agree: (n: number): string => `Agree to ${counted(n, 'vital place')}`,
  waiting: (n: number): string =>
    `${counted(n, 'vital place')} ${n === 1 ? 'keeps' : 'keep'} what was entered and ${n === 1 ? 'waits' : 'wait'} for your yes.`,
  keep: 'Leave it as it is',
  done: (levels: RoomLevels, mine: boolean): string => {
    const { mode, name } = levels.room
    if (mode === 'as-before') return `${name} is kept by the levels people entered.`
    if (mode === 'beside')
      return `${name} is kept by the levels people entered; what is worked out stands beside them from now on.`
    const vital =
      levels.vital > 0 && !mine ? ` ${counted(levels.vital, 'vital place')} of it will wait for the reviewer.` : ''
    return `${name} is kept by what is worked out. Its levels follow in a moment.${vital}`
  },
} as const
