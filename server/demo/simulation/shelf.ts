import { isBelieved } from '#shared/replenishment/believed.ts'
import { suggestedPacks } from '#shared/replenishment/suggested-packs.ts'
import { countOf } from './count-slips.ts'
import { dayMs } from './days.ts'
import { scriptOf, type ForcedOrder, type Script } from './ending.ts'
import { keyed, operationId } from './keyed.ts'
import { longestWalkMs, wardHands, type Round } from './rounds.ts'
import { eventsOf, putAwayBy, type RunInput, type ShelfEvent } from './shelf-plan.ts'
import type { SimOp } from './sim-types.ts'
import { coordinatorOf, putAways, workingDaysLater, type Slot } from './supply.ts'
import type { PlannedTransfer } from './transfers.ts'

/** One line a place wants, before the lines of a slot become an order. */
export interface WantedLine {
  line: string
  slot: Slot
  packs: number
  /** Makes an order of its own. */
  story: ForcedOrder | null
  cancelledAt: number | null
  /** Cancelled although it came: nobody had keyed it. */
  wasUnkeyed: boolean
}

export interface ShelfLife {
  ops: SimOp[]
  lines: WantedLine[]
}

const takeShare = 0.012
/** Before the world stops some lists were not gone through any more: somebody has to find work. */
const pausedMs = 2.2 * dayMs
const pausedShare = 0.6
const storesPhone = 'tg-stores-1'

/** The life of one place within a window: what was used, counted, ordered and put away. Pure. */
export function liveShelf(input: RunInput): ShelfLife {
  const script = scriptOf(input.state, input.days, input.rounds, input.window)
  return script.neverCounted ? { ops: [], lines: [] } : new Shelf(input, script).live()
}

/** One shelf and what the record says of it; the two drift apart until somebody counts. */
class Shelf {
  private readonly ops: SimOp[] = []
  private readonly lines: WantedLine[] = []
  private readonly queue: ShelfEvent[]
  private readonly open: Map<string, { units: number; expectedOn: string }>
  private truth: number
  private record: number | null

  constructor(
    private readonly input: RunInput,
    private readonly script: Script,
  ) {
    const { state } = input
    this.record = state.record
    this.truth = state.record ?? firstStock(state.plan)
    this.open = new Map(state.open.map((l) => [l.line, { units: l.units, expectedOn: l.expectedOn }]))
    this.queue = eventsOf(input, script)
  }

  live(): ShelfLife {
    const { state, window } = this.input
    for (let event = this.queue.shift(); event && event.at <= window.to; event = this.queue.shift()) {
      // Before its own window begins a place is only used.
      if (event.at > state.startAt || event.kind === 'use') this.happen(event)
    }
    return { ops: this.ops, lines: this.lines }
  }

  private happen(event: ShelfEvent): void {
    switch (event.kind) {
      case 'use':
        return this.use(event.at)
      case 'round':
        return this.count(event.at, event.round)
      case 'slot':
        return this.decide(event.slot)
      case 'put-away':
        return this.putAway(event)
      case 'waste':
        return this.waste(event.at)
      case 'transfer':
        return this.transfer(event.at, event.transfer)
      case 'shelf':
        this.truth = event.units
        return
      case 'hold':
        return this.hold(event)
    }
  }

  /** What is wanted and not there is lost; now and then a vital unit is written down as taken. */
  private use(at: number): void {
    if (this.truth <= 0) return
    this.truth -= 1
    const { plan, startAt } = this.input.state
    if (plan.item.ved !== 'V' || this.record === null || this.record < 1 || at <= startAt) return
    if (keyed('take', plan.code, at)() >= takeShare) return
    this.record -= 1
    this.write({ type: 'take', quantity: 1, at, ...this.hands(at) })
  }

  private count(at: number, round: Round): void {
    // Where a story needs the number, it is counted right.
    const isTold = this.script.shelf !== null && at > this.script.shelf.at
    const slip = keyed('slip', this.input.state.plan.code, round.id)
    const written = isTold ? { first: this.truth, corrected: null } : countOf(this.truth, slip)
    const by = { person: round.person, device: round.device }
    const arrives = round.isOffline ? round.at + longestWalkMs : undefined
    const counted = this.write({ type: 'count', quantity: written.first, at, ...by }, arrives)
    this.record = written.first
    if (written.corrected === null || !counted) return
    const mended = { quantity: written.corrected, at: at + 70_000, reason: 'Mistyped', targetOpId: counted.opId }
    if (this.write({ type: 'count.correct', ...mended, ...by }, arrives)) this.record = written.corrected
  }

  /** The coordinator goes through the list and orders where the position is at the point or under it. */
  private decide(slot: Slot): void {
    const { state } = this.input
    const story = this.script.forced?.slot === slot ? this.script.forced : null
    if (this.record === null) return
    const believed = [...this.open.values()].filter((l) => isBelieved(l.expectedOn, slot.date, false))
    const position = this.record + believed.reduce((sum, l) => sum + l.units, 0)
    if (!story && (position > state.reorderPoint || this.isPaused(slot))) return
    const { plan, reorderPoint, parLevel } = state
    const packSize = plan.item.unitsPerOrder
    const packs = suggestedPacks({ position, reorderPoint, parLevel, packSize, capacity: plan.capacity })
    const line = `${slot.supplier}/${slot.cutOff}/${plan.code}${story ? `/${story.name}` : ''}`
    this.open.set(line, { units: packs * packSize, expectedOn: slot.expectedOn })
    const wanted: WantedLine = { line, slot, packs, story, cancelledAt: null, wasUnkeyed: false }
    this.lines.push(wanted)
    if (story) this.deliverStory(wanted, story)
    else this.deliver(wanted)
  }

  private isPaused(slot: Slot): boolean {
    const { state, window } = this.input
    if (!window.last || slot.decidedAt <= window.to - pausedMs) return false
    return keyed('paused', state.plan.code, slot.ordinal)() < pausedShare
  }

  private deliverStory({ line, slot, packs }: WantedLine, story: ForcedOrder): void {
    if (story.putAwayAt === null) return
    const units = packs * this.input.state.plan.item.unitsPerOrder
    this.enqueue({ at: story.putAwayAt, kind: 'put-away', line, units, slot, isKeyed: true })
  }

  private deliver(wanted: WantedLine): void {
    const { slot, line, packs } = wanted
    const { plan } = this.input.state
    wanted.cancelledAt = this.input.cancelledAt(slot)
    if (wanted.cancelledAt !== null) {
      this.open.delete(line)
      return
    }
    const span = this.script.unkeyed
    const parts = putAways(slot, plan.code, packs)
    for (const part of parts) {
      const at = putAwayBy(this.input, slot, part.at)
      const mayBeLost = parts.length === 1 && span !== null && at > span.from && at < span.to
      const isLost = mayBeLost && !this.lines.some((l) => l.wasUnkeyed)
      if (isLost) {
        wanted.wasUnkeyed = true
        wanted.cancelledAt = workingDaysLater(at, 4)
      }
      const units = part.packs * plan.item.unitsPerOrder
      this.enqueue({ at, kind: 'put-away', line, units, slot, isKeyed: !isLost })
    }
  }

  private putAway(event: Extract<ShelfEvent, { kind: 'put-away' }>): void {
    const { plan } = this.input.state
    const { at, line, units } = event
    this.truth += units
    const open = this.open.get(line)
    if (event.isKeyed && open && open.units > units) open.units -= units
    else this.open.delete(line)
    if (!event.isKeyed) return
    if (this.record !== null) this.record += units
    const random = keyed('put-away-by', plan.code, at)
    const isCoordinator = random() < 0.3
    const by = isCoordinator ? { person: coordinatorOf(plan.room), device: storesPhone } : this.hands(at)
    if (isCoordinator && random() < 0.7)
      this.write({ type: 'arrival', quantity: units, at: at - 25 * 60_000, ...by, line })
    this.write({ type: 'receipt', quantity: units, at, ...by, line })
  }

  private waste(at: number): void {
    const random = keyed('wasted', this.input.state.plan.code, at)
    const quantity = 1 + Math.floor(random() * 2)
    if (this.record === null || Math.min(this.truth, this.record) < quantity + 2) return
    this.truth -= quantity
    this.record -= quantity
    const reasons = ['Past its date', 'Dropped', 'Packet torn', 'Opened and not used']
    const reason = reasons[Math.floor(random() * reasons.length)]
    this.write({ type: 'wastage', quantity, at, ...this.hands(at), reason })
  }

  /** Written once, by the end that gives. */
  private transfer(at: number, transfer: PlannedTransfer): void {
    const gives = transfer.fromBin === this.input.state.plan.code
    const change = gives ? -transfer.units : transfer.units
    this.truth = Math.max(0, this.truth + change)
    if (this.record !== null) this.record += change
    if (gives) this.write({ type: 'transfer', quantity: transfer.units, at, ...this.hands(at), toBin: transfer.toBin })
  }

  private hold({ at, units, reason }: Extract<ShelfEvent, { kind: 'hold' }>): void {
    if (this.record === null || Math.min(this.truth, this.record) < units) return
    this.truth -= units
    this.record -= units
    const person = coordinatorOf(this.input.state.plan.room)
    this.write({ type: 'hold', quantity: units, at, person, device: storesPhone, reason })
  }

  private hands(at: number): { person: string; device: string } {
    const { room, code } = this.input.state.plan
    return wardHands(room, keyed('hands', code, at))
  }

  private enqueue(event: ShelfEvent): void {
    const later = this.queue.findIndex((e) => e.at > event.at)
    if (later < 0) this.queue.push(event)
    else this.queue.splice(later, 0, event)
  }

  /** Writes an entry down unless it lies outside the place's window. @returns it when it was */
  private write(op: Omit<SimOp, 'opId' | 'bin' | 'recordedAt'>, arrivesAt?: number): SimOp | null {
    const { state, window } = this.input
    const at = Math.round(op.at)
    if (at <= state.startAt || at > window.to) return null
    const soon = at + 2000 + (at % 7) * 1000
    const recordedAt = Math.min(window.to, Math.max(at, arrivesAt ?? soon))
    const made = { ...op, at, recordedAt, bin: state.plan.code, opId: operationId(at, state.plan.code, op.type) }
    this.ops.push(made)
    return made
  }
}

/** What stood there when the history began. */
function firstStock(plan: RunInput['state']['plan']): number {
  if (plan.overflowOf !== null) return plan.item.unitsPerOrder * 2
  const draw = keyed('first', plan.code)()
  return Math.round(plan.reorderPoint + draw * (plan.parLevel - plan.reorderPoint))
}
