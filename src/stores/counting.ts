import { defineStore } from 'pinia'
import { computed, ref, shallowRef } from 'vue'
import { unusualCount, type CountQuestion, type OpenLine } from '#shared/counts/unusual-count.ts'
import type { RoundDraft } from '#shared/stored/draft/index.ts'
import { deleteDraft, readDraft, writeDraft } from '#src/services/drafts.ts'
import type { LocalBin } from '#src/services/overlay.ts'
import {
  countEntries,
  situationOf,
  spreadRise,
  takeBackEntries,
  type Basis,
  type CountPlace,
  type UnknownPlace,
} from './count-entry.ts'
import { useOutboxStore } from './outbox.ts'
import { useRoomsCacheStore } from './rooms-cache.ts'
import {
  dueBins,
  isAlive,
  newRound,
  nextPlace,
  resumed,
  stepped,
  touched,
  walkingOrder,
  withDigit,
  withPlace,
} from './round.ts'
import { useSessionStore } from './session.ts'

const UNDO_MS = 10_000

export interface Undo {
  place: CountPlace
  quantity: number
  opId: string
  receiptOpIds: string[]
  until: number
}

/** One walk through a room: where one stands, what is typed, what is saved. Nothing in it waits for a network. */
export const useCountingStore = defineStore('counting', () => {
  const session = useSessionStore()
  const rooms = useRoomsCacheStore()
  const outbox = useOutboxStore()
  const round = shallowRef<RoundDraft | null>(null)
  /** Set while a place is counted whose code this phone does not know. */
  const unknown = ref<UnknownPlace | null>(null)
  const unknownText = ref('')
  const question = shallowRef<CountQuestion | null>(null)
  const undo = shallowRef<Undo | null>(null)
  /** What kept a count from being saved; the number stays on the screen. */
  const saveTrouble = shallowRef<unknown>(null)
  const saving = ref(false)
  // During a round no line moves under the thumb: each place keeps the point it was first shown with.
  const points = new Map<string, number | null>()
  let undoTimer: ReturnType<typeof setTimeout> | undefined
  let writing: Promise<void> = Promise.resolve()

  const roomId = computed(() => round.value?.roomId ?? null)
  const bins = computed(() => (roomId.value ? rooms.bins(roomId.value, Date.now()) : []))
  const walk = computed(() => {
    const byId = new Map(bins.value.map((bin) => [bin.id, bin]))
    return (round.value?.walk ?? []).map((id) => byId.get(id)).filter((bin): bin is LocalBin => bin !== undefined)
  })
  const place = computed<CountPlace | null>(() => {
    if (unknown.value) return { unknown: unknown.value }
    const bin = walk.value.find((one) => one.id === round.value?.at)
    if (!bin) return null
    if (!points.has(bin.id)) points.set(bin.id, bin.reorderPoint)
    return { known: { ...bin, reorderPoint: points.get(bin.id) ?? null } }
  })
  const known = computed(() => (place.value && 'known' in place.value ? place.value.known : null))
  const text = computed(() =>
    unknown.value ? unknownText.value : (round.value?.digits[round.value.at ?? '']?.text ?? ''),
  )
  const total = computed(() => round.value?.walk.length ?? 0)
  const doneCount = computed(() => Object.keys(round.value?.done ?? {}).length)
  const finished = computed(() => round.value !== null && round.value.at === null && !unknown.value)
  /** Vital items and doubtful records are counted without seeing the last number. */
  const blind = computed(() => known.value?.item?.ved === 'V' || known.value?.recordsDisagree === true)

  /** Keeps the round behind; one write after the other, so that the last state is the one kept. */
  function set(next: RoundDraft | null): void {
    round.value = next
    if (!next) return
    writing = writing.then(() => writeDraft(next)).catch(() => undefined)
  }

  /** Begins a round, or goes on with the one that was left in this room. False: nothing of the room is on this phone. */
  async function open(id: string, wish: { scope: 'due' | 'all'; binId?: string }): Promise<boolean> {
    const userId = session.user?.id
    if (!userId) return false
    await outbox.load().catch(() => undefined)
    const room = await rooms.openKept(id)
    if (!room) return false
    const all = rooms.bins(id, Date.now())
    const kept = await readDraft(userId, id).catch(() => null)
    const places = new Set(walkingOrder(all).map((bin) => bin.id))
    const back = kept && resumed(kept, outbox.entries, places, Date.now())
    points.clear()
    unknown.value = null
    question.value = null
    saveTrouble.value = null
    const due = wish.scope === 'due' ? dueBins(all, Date.now()) : []
    const fresh = (): RoundDraft =>
      newRound(userId, id, due.length > 0 ? due : walkingOrder(all), due.length > 0 ? 'due' : 'all', Date.now())
    const goesOn = back && isAlive(back, Date.now()) && (wish.scope === 'due' || back.scope === 'all')
    set(goesOn ? back : fresh())
    if (wish.binId && places.has(wish.binId)) go(wish.binId)
    return true
  }

  function edit(next: string): void {
    if (unknown.value) {
      unknownText.value = next
      return
    }
    const now = round.value
    if (!now?.at) return
    set(touched({ ...now, digits: { ...now.digits, [now.at]: { text: next, at: Date.now() } } }, Date.now()))
  }
  const press = (digit: string): void => edit(withDigit(text.value, digit))
  const erase = (): void => edit(text.value.slice(0, -1))
  const step = (by: number): void =>
    edit(stepped(text.value, by, blind.value ? 0 : (known.value?.lastCount?.quantity ?? 0)))
  const enter = (quantity: number): void => edit(String(quantity))

  /** To a place of this room, into the walk when it was not part of it. */
  function go(binId: string): void {
    if (!round.value) return
    unknown.value = null
    question.value = null
    saveTrouble.value = null
    const next = withPlace(round.value, binId)
    set(touched({ ...next, at: binId, skipped: next.skipped.filter((id) => id !== binId) }, Date.now()))
  }

  function goUnknown(code: string, display: string): void {
    if (!round.value) return
    unknown.value = { roomId: round.value.roomId, code, display }
    unknownText.value = ''
    question.value = null
  }

  function leaveUnknown(): void {
    unknown.value = null
    unknownText.value = ''
  }

  function skip(): void {
    const now = round.value
    if (unknown.value) return leaveUnknown()
    if (!now?.at) return
    const skipped = [...now.skipped.filter((id) => id !== now.at), now.at]
    const next = { ...now, skipped }
    set(touched({ ...next, at: nextPlace(next, now.at) }, Date.now()))
  }

  /** Asks about an unusual number, or saves it. Resolves once it is safe on this phone (then true), or asked about. */
  async function submit(): Promise<boolean> {
    if (text.value === '' || saving.value || !place.value) return false
    const quantity = Number(text.value)
    const bin = known.value
    const room = roomId.value ? rooms.kept[roomId.value] : undefined
    if (bin && room) {
      const lines = rooms.openLines(room.roomId, bin.id)
      question.value = unusualCount(situationOf(bin, room, lines, quantity, Date.now()))
      if (question.value) return false
    }
    return save(quantity, [], null)
  }

  /** The answer to a question: the number to keep, and what was put away. */
  async function answer(quantity: number, putAway: readonly OpenLine[] = []): Promise<boolean> {
    const asked = question.value
    if (!asked) return false
    const rise = asked.kind === 'rise' ? asked.rise : 0
    return save(quantity, spreadRise(rise, putAway), asked)
  }
  const backToNumber = (): void => {
    question.value = null
  }

  function basisOf(asked: CountQuestion | null, quantity: number, putAway: number): Basis {
    const room = roomId.value ? rooms.kept[roomId.value] : undefined
    const answered = putAway > 0 ? 'put-away' : quantity === asked?.keep ? 'kept' : 'changed'
    return {
      roomVersion: room?.version ?? null,
      lastShown: known.value?.lastCount?.quantity ?? null,
      question: asked?.kind ?? null,
      answer: asked ? answered : null,
    }
  }

  async function save(
    quantity: number,
    putAway: { line: OpenLine; quantity: number }[],
    asked: CountQuestion | null,
  ): Promise<boolean> {
    const here = place.value
    if (!here || saving.value) return false
    saving.value = true
    saveTrouble.value = null
    const fresh = countEntries(here, quantity, putAway, basisOf(asked, quantity, putAway.length))
    try {
      await outbox.save(fresh)
    } catch (error) {
      // Not on this phone: the number stays where it is, and nothing moves on.
      saveTrouble.value = error
      return false
    } finally {
      saving.value = false
    }
    question.value = null
    const opIds = fresh.map((entry) => entry.op.opId)
    const opId = opIds.at(-1) ?? ''
    offerUndo({ place: here, quantity, opId, receiptOpIds: opIds.slice(0, -1), until: Date.now() + UNDO_MS })
    advance(here, { opId, quantity, receiptOpId: opIds.length > 1 ? (opIds[0] ?? null) : null, at: Date.now() })
    return true
  }

  function advance(here: CountPlace, mark: RoundDraft['done'][string]): void {
    const now = round.value
    if ('unknown' in here || !now) return leaveUnknown()
    const digits = Object.fromEntries(Object.entries(now.digits).filter(([id]) => id !== here.known.id))
    const next = { ...now, digits, done: { ...now.done, [here.known.id]: mark } }
    set(touched({ ...next, at: nextPlace(next, here.known.id) }, Date.now()))
  }

  function offerUndo(next: Undo | null): void {
    clearTimeout(undoTimer)
    undo.value = next
    if (next) undoTimer = setTimeout(() => (undo.value = null), UNDO_MS)
  }

  /** Takes the last count back and stands at its place again, with its number typed. */
  async function takeBack(): Promise<boolean> {
    const last = undo.value
    if (!last || saving.value) return false
    saving.value = true
    try {
      await outbox.save(takeBackEntries(last.place, last.opId, last.receiptOpIds))
    } catch (error) {
      saveTrouble.value = error
      return false
    } finally {
      saving.value = false
    }
    offerUndo(null)
    if ('unknown' in last.place) {
      unknown.value = last.place.unknown
      unknownText.value = String(last.quantity)
      return true
    }
    const now = round.value
    if (!now) return true
    const id = last.place.known.id
    const done = Object.fromEntries(Object.entries(now.done).filter(([key]) => key !== id))
    const digits = { ...now.digits, [id]: { text: String(last.quantity), at: Date.now() } }
    unknown.value = null
    set(touched({ ...now, done, digits, at: id }, Date.now()))
    return true
  }

  /** How the round went: places, minutes at work, and how many were low without the record knowing. */
  const summary = computed(() => {
    const now = round.value
    if (!now) return null
    const counted = walk.value.filter((bin) => now.done[bin.id])
    const found = counted.filter((bin) => bin.states.includes('below') && !now.knownBelow.includes(bin.id))
    return { places: counted.length, minutes: Math.max(1, Math.round(now.activeMs / 60_000)), found: found.length }
  })

  /** Leaves the page; the round is kept and goes on where it stood. */
  async function leave(): Promise<void> {
    round.value = null
    unknown.value = null
    question.value = null
    offerUndo(null)
    await writing
  }

  /** Ends the round: what was counted is in the outbox, the walk is forgotten. */
  async function finish(): Promise<void> {
    const now = round.value
    await leave()
    if (now) await deleteDraft(now.userId, now.roomId).catch(() => undefined)
  }

  async function startOver(scope: 'due' | 'all'): Promise<void> {
    const now = round.value
    if (!now) return
    await writing
    await deleteDraft(now.userId, now.roomId).catch(() => undefined)
    await open(now.roomId, { scope })
  }

  return {
    round,
    roomId,
    walk,
    place,
    known,
    unknown,
    text,
    total,
    doneCount,
    finished,
    blind,
    question,
    undo,
    saveTrouble,
    saving,
    summary,
    open,
    press,
    erase,
    step,
    enter,
    go,
    goUnknown,
    leaveUnknown,
    skip,
    submit,
    answer,
    backToNumber,
    takeBack,
    leave,
    finish,
    startOver,
  }
})
