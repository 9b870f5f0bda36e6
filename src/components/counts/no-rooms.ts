import type { Room } from '#shared/contracts/catalogue.ts'
import { roundWords } from '#src/i18n/en.ts'

/** Why there is no room to count: none was read yet, or the record says that none is this person's. */
export function noRoomsSaid(rooms: readonly Room[] | null, editor: boolean): { title: string; what: string } {
  return rooms === null
    ? { title: roundWords.noRooms, what: roundWords.noRoomsWhat }
    : { title: roundWords.noneYours, what: roundWords.noneYoursWhat(editor) }
}
