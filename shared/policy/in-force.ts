/** Levels a bin is kept by. Units of use. */
export interface Levels {
  reorderPoint: number | null
  parLevel: number | null
  orderQuantity: number | null
}

/** What may make a bin's figures be looked at again. */
export const causesOfChange = [
  'count',
  'service-level',
  'calendar',
  'rhythm',
  'planned-change',
  'exclusion',
  'like-wards',
  'mode',
  'mode-vital',
  'entered',
  'accepted',
  'nightly',
] as const

/** What decides whether a new calculation takes over. */
export interface Settlement {
  mode: 'as-before' | 'beside' | 'calculated'
  /** Present figures, or null before the first. */
  inForce: Levels | null
  /** A calculation, or null where there is nothing to calculate from. */
  computed: Levels | null
  /** What a person entered. */
  entered: Levels
  /** What made it be looked at. `mode-vital`: somebody but the reviewer changed how a vital item's room is kept. */
  cause: (typeof causesOfChange)[number]
  /** Counts in a row, this one included, whose calculation stood below the figures in force. */
  lowerCounts: number
}

export interface Settled extends Levels {
  changed: boolean
  /** A calculation that does not hold yet, and what it waits for. */
  pending: {
    reorderPoint: number
    parLevel: number | null
    waitsFor: 'three-counts' | 'larger-change' | 'a-person'
  } | null
}

const agreeing = 3
/** One part in so many of the figure in force. */
const part = 10
const units = 2

type Cause = Settlement['cause']
type Computed = Levels & { reorderPoint: number }

/** These change the question itself, so the answer holds at once. */
const atOnce = new Set<Cause>([
  'service-level',
  'calendar',
  'rhythm',
  'planned-change',
  'exclusion',
  'like-wards',
  'mode',
  'entered',
  'accepted',
])
/** Acts of a person about this very figure: they may also lead below a level someone entered. */
const byPerson = new Set<Cause>(['service-level', 'mode', 'accepted'])

/**
 * Which figures are in force now. They stand still while counts come and go: a calculation takes over at once when a
 * reviewer acts or a lead time, calendar or rhythm changes, or when it is higher by at least 10 % and 2 units; lower by
 * as much only when three counts in a row agree; below a level someone entered only with a person's yes.
 *
 * A yes once given stays: figures already below the entered level may go on falling by the rule of three counts, until
 * somebody enters a level again. Shape: `lowerCounts` counts this count too. Units: units of use.
 */
export function settle(s: Settlement): Settled {
  if (s.mode !== 'calculated' || s.computed?.reorderPoint == null) return keepEntered(s)
  const computed = s.computed as Computed
  const floor = enteredFloor(s)
  if (floor !== null && computed.reorderPoint < floor) return stopAtEntered(s, computed, floor)
  const now = s.inForce?.reorderPoint ?? null
  if (s.inForce === null || now === null || atOnce.has(s.cause)) return settled(s, computed, null)
  if (computed.reorderPoint === now) return settled(s, computed, null)
  if (!isClear(computed.reorderPoint, now)) return settled(s, s.inForce, pendingOf(computed, 'larger-change'))
  if (computed.reorderPoint > now || mayFall(s)) return settled(s, computed, null)
  return settled(s, s.inForce, pendingOf(computed, 'three-counts'))
}

/** A move worth making; smaller ones come and go with every count. */
const isClear = (computed: number, now: number): boolean =>
  Math.abs(computed - now) >= units && Math.abs(computed - now) >= now / part

const mayFall = (s: Settlement): boolean => atOnce.has(s.cause) || s.lowerCounts >= agreeing

/** The entered level below which nothing goes by itself; null where there is none or a person agreed to less. */
function enteredFloor(s: Settlement): number | null {
  const entered = s.entered.reorderPoint
  if (entered === null || byPerson.has(s.cause)) return null
  const now = s.inForce?.reorderPoint ?? null
  const agreed = now !== null && now < entered && s.cause !== 'entered'
  return agreed ? null : entered
}

/** Falls to the entered level at most; the rest of the way waits for a person. */
function stopAtEntered(s: Settlement, computed: Computed, floor: number): Settled {
  const now = s.inForce?.reorderPoint ?? null
  if (s.inForce === null || now === null || s.cause === 'entered')
    return settled(s, s.entered, pendingOf(computed, 'a-person'))
  if (now === floor) return settled(s, s.inForce, pendingOf(computed, 'a-person'))
  return mayFall(s)
    ? settled(s, s.entered, pendingOf(computed, 'a-person'))
    : settled(s, s.inForce, pendingOf(computed, 'three-counts'))
}

function keepEntered(s: Settlement): Settled {
  const hasEntered = s.entered.reorderPoint !== null || s.entered.parLevel !== null
  // Without an entered level a calculation is better than nothing, also where the room is kept as before.
  const levels = hasEntered || s.computed?.reorderPoint == null ? s.entered : s.computed
  const computed = s.computed?.reorderPoint ?? null
  const shown = s.mode === 'beside' && hasEntered && computed !== null && computed !== levels.reorderPoint
  return settled(s, levels, shown ? pendingOf(s.computed as Levels & { reorderPoint: number }, 'a-person') : null)
}

const pendingOf = (
  computed: Levels & { reorderPoint: number },
  waitsFor: NonNullable<Settled['pending']>['waitsFor'],
): NonNullable<Settled['pending']> => ({
  reorderPoint: computed.reorderPoint,
  parLevel: computed.parLevel,
  waitsFor,
})

function settled(s: Settlement, levels: Levels, pending: Settled['pending']): Settled {
  const before = s.inForce
  const changed =
    before === null ||
    before.reorderPoint !== levels.reorderPoint ||
    before.parLevel !== levels.parLevel ||
    before.orderQuantity !== levels.orderQuantity
  return {
    reorderPoint: levels.reorderPoint,
    parLevel: levels.parLevel,
    orderQuantity: levels.orderQuantity,
    changed,
    pending,
  }
}
