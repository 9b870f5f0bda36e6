import { makeShelfCode } from '#shared/barcode/shelf-code.ts'
import { randomBytesOf, seededRandom } from '#shared/kernel/random.ts'
import { negativeBinomialQuantile } from '#shared/stats/negative-binomial-quantile.ts'
import { hospital, rooms, suppliers, type DemoRoom } from './catalogue/places.ts'
import { items, type DemoItem, type DemoUse } from './catalogue/items.ts'
import type { Shape } from './catalogue/item-row.ts'
import { story, type StoryPlace } from './story.ts'

/** What every draw of the demo hospital starts from. */
export const demoSeed = 'Tallowmere General 1'

/** One place of the demo hospital: where it is, what stands there and how it is used. Units of use. */
export interface BinPlan {
  /** Eight characters; the same in every demo hospital. */
  code: string
  room: DemoRoom
  item: DemoItem
  bay: string
  shelf: string
  walkOrder: number
  /** Code of the main place of an overflow place. */
  overflowOf: string | null
  meanPerDay: number
  shape: Shape
  reorderPoint: number
  parLevel: number
  capacity: number
}

/** Variance-to-mean ratio of each shape over a few days. */
export const dispersionOf: Record<Shape, number> = {
  steady: 1.0001,
  bursty: 2.2,
  lumpy: 9,
  weekday: 1.4,
  stopped: 1.0001,
}

const placesPerShelf = 6
const shelvesPerBay = 3

/** Working days of lead in days of the week, weekends included. */
const calendarDays = (workingDays: number): number => workingDays * 1.4

/** What a person would enter: enough for a count gone by, the wait for the next order day and the delivery. */
function enteredPoint(item: DemoItem, room: DemoRoom, meanPerDay: number, shape: Shape, feel: number): number {
  const supplier = suppliers.find((s) => s.code === item.supplier)!
  const betweenSlots = 7 / supplier.orderDays.length
  const days = room.countEveryDays + betweenSlots * 0.7 + calendarDays(supplier.leadWorkingDays)
  const ratio = dispersionOf[shape]
  const aim = hospital.levels[item.ved]
  const exact = negativeBinomialQuantile(aim, (meanPerDay * days) / (ratio - 1), 1 / ratio)
  return tidy(exact * feel)
}

/** People write round numbers. */
function tidy(units: number): number {
  const step = units < 12 ? 1 : units < 50 ? 2 : units < 120 ? 5 : 10
  return Math.max(1, Math.round(units / step) * step)
}

const is = (place: StoryPlace, room: DemoRoom, item: DemoItem): boolean =>
  place.room === room.code && place.item === item.code

function planOf(room: DemoRoom, item: DemoItem, index: number, meanPerDay: number, shape: Shape): BinPlan {
  const random = seededRandom(`${demoSeed}/place/${room.code}/${item.code}`)
  const code = makeShelfCode((count) => randomBytesOf(random, count))
  const pack = item.unitsPerOrder
  const reorderPoint = enteredPoint(item, room, meanPerDay, shape, 0.92 + random() * 0.25)
  const packs = Math.max(1, Math.ceil((meanPerDay * 7) / pack))
  const parLevel = reorderPoint + packs * pack
  const small = is(story.smallShelf, room, item)
  const shelf = Math.floor(index / placesPerShelf)
  return {
    code,
    room,
    item,
    bay: String.fromCharCode(65 + Math.floor(shelf / shelvesPerBay)),
    shelf: String((shelf % shelvesPerBay) + 1),
    walkOrder: (index + 1) * 10,
    overflowOf: null,
    meanPerDay,
    shape,
    reorderPoint: small ? 38 : reorderPoint,
    parLevel: small ? story.smallShelf.capacity - pack + 4 : parLevel,
    capacity: small ? story.smallShelf.capacity : Math.ceil((parLevel * 1.15 + pack) / 5) * 5,
  }
}

/** The second place of an item, at the end of the room's walk. */
function overflowPlan(main: BinPlan, index: number): BinPlan {
  const random = seededRandom(`${demoSeed}/overflow/${main.room.code}/${main.item.code}`)
  return {
    ...main,
    code: makeShelfCode((count) => randomBytesOf(random, count)),
    bay: 'Floor',
    shelf: '1',
    walkOrder: (index + 1) * 10,
    overflowOf: main.code,
    meanPerDay: 0,
    shape: 'steady',
    reorderPoint: 0,
    parLevel: 0,
    capacity: main.item.unitsPerOrder * 4,
  }
}

const ownUses = (room: DemoRoom): { item: DemoItem; use: DemoUse }[] =>
  items.flatMap((item) => item.uses.filter((u) => u.roomKey === room.key).map((use) => ({ item, use })))

/** Of the items that stand in all the rooms it is like, every second: enough to learn from one another. */
function likeUses(room: DemoRoom, like: readonly string[]): { item: DemoItem; use: DemoUse }[] {
  const shared = items.filter((item) => like.every((key) => item.uses.some((u) => u.roomKey === key)))
  return shared.flatMap((item, i) => {
    const use = item.uses.find((u) => u.roomKey === like[0])!
    const share = 0.6 + 0.8 * seededRandom(`${demoSeed}/like/${room.code}/${item.code}`)()
    return i % 2 === 0 ? [{ item, use: { ...use, meanPerDay: use.meanPerDay * share } }] : []
  })
}

function plansOfRoom(room: DemoRoom): BinPlan[] {
  const here = room.like ? likeUses(room, room.like) : ownUses(room)
  const mains = here.map(({ item, use }, i) => planOf(room, item, i, use.meanPerDay, use.shape))
  const overflow = mains.filter((p) => story.overflow.some((place) => is(place, p.room, p.item)))
  return [...mains, ...overflow.map((main, i) => overflowPlan(main, mains.length + i))]
}

/** Every place of the demo hospital, main places before their overflow places. Pure: the same on every machine. */
export const binPlans = (): BinPlan[] => rooms.flatMap(plansOfRoom)

/** The main place of a story. @throws {RangeError} when the catalogue lost it */
export function storyPlan(plans: readonly BinPlan[], place: StoryPlace): BinPlan {
  const found = plans.find((p) => p.overflowOf === null && is(place, p.room, p.item))
  if (!found) throw new RangeError(`no place holds ${place.item} in ${place.room}`)
  return found
}
