import { z } from 'zod'
import { Bin } from './bins.ts'
import { Room, RoomMode } from './catalogue.ts'
import { contract, idParams } from './contract.ts'

/** One place on the sheet that stands before a room is kept another way. */
export const RoomLevelRow = z.object({
  bin: Bin,
  entered: z.number().int().nullable(),
  calculated: z.number().int(),
  /** Units; above 0 where more is worked out than was entered. */
  difference: z.number().int(),
  /** Holds once the room is kept by what is worked out; vital items wait for the reviewer. */
  waitsForReviewer: z.boolean(),
})
export type RoomLevelRow = z.infer<typeof RoomLevelRow>
export const RoomLevels = z.object({
  room: Room,
  /** The ten places where entered and worked out differ most, by share of the entered level. */
  rows: z.array(RoomLevelRow),
  /** Places with a calculation, those that would rise and those that would fall. */
  places: z.number().int(),
  rise: z.number().int(),
  fall: z.number().int(),
  /** Vital places that would wait for the reviewer. */
  vital: z.number().int(),
  /** Places with nothing to work out from yet: what was entered stays. */
  entered: z.number().int(),
})
export type RoomLevels = z.infer<typeof RoomLevels>
export const readRoomLevels = contract({
  method: 'GET',
  path: '/rooms/:id/levels',
  summary: 'Entered and worked-out levels of a room side by side',
  allow: ['coordinator', 'reviewer', 'administrator'],
  params: idParams,
  answer: RoomLevels,
})
export const setRoomMode = contract({
  method: 'POST',
  path: '/rooms/:id/mode',
  summary: 'Say how a room is kept; vital items only by the reviewer',
  allow: ['coordinator', 'reviewer', 'administrator'],
  params: idParams,
  body: z.strictObject({ mode: RoomMode, reason: z.string().trim().max(300).default('') }),
  answer: RoomLevels,
})
