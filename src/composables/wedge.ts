import { makeWedgeBuffer } from './wedge-buffer.ts'

const SILENCE_MS = 120
/** A key is given to the page as typed only after this pause, so that the first characters of a scan never are. */
const TYPED_AFTER_MS = 45

/** Held while other keys are sent; scanners press them between the characters of a scan. */
const modifiers = ['Shift', 'Control', 'Alt', 'AltGraph', 'Meta', 'CapsLock']

/** What the watcher needs of a keyboard event. */
export type WedgeEvent = Pick<
  KeyboardEvent,
  'key' | 'code' | 'ctrlKey' | 'altKey' | 'metaKey' | 'timeStamp' | 'preventDefault' | 'stopPropagation'
>

/**
 * Tells a keyboard scanner from a person and hands each its own: a scan ends with Enter, Tab or 120 ms of silence; keys
 * a person pressed come back one by one, a moment later.
 *
 * @param onTyped one character or `Enter`, `Backspace`, `ArrowUp`, `ArrowDown`; true when the page used it
 */
export function makeWedge(onScan: (text: string) => void, onTyped: (key: string) => boolean) {
  const buffer = makeWedgeBuffer()
  let silence: ReturnType<typeof setTimeout> | undefined
  let typed: ReturnType<typeof setTimeout> | undefined
  let pending: string[] = []

  function giveTyped(): void {
    clearTimeout(typed)
    const keys = pending
    pending = []
    for (const key of keys) onTyped(key)
  }

  /** Ends what was collected; true when it was a scan. */
  function finish(): boolean {
    clearTimeout(silence)
    const scan = buffer.finish()
    if (scan === null) {
      giveTyped()
      return false
    }
    clearTimeout(typed)
    pending = []
    onScan(scan)
    return true
  }

  function handle(event: WedgeEvent, onControl: boolean): void {
    const { key } = event
    if (modifiers.includes(key)) return
    if (key === 'Enter' || key === 'Tab') {
      if (finish()) {
        event.preventDefault()
        event.stopPropagation()
      } else if (key === 'Enter' && !onControl && onTyped('Enter')) {
        event.preventDefault()
      }
      return
    }
    const modified = event.ctrlKey || event.altKey || event.metaKey
    const taken = buffer.push({
      key,
      code: event.code,
      ctrlKey: event.ctrlKey,
      altKey: event.altKey,
      metaKey: event.metaKey,
      at: event.timeStamp,
    })
    if (taken) {
      clearTimeout(silence)
      silence = setTimeout(finish, SILENCE_MS)
      // A browser's own meaning of the separator, or of letters in the middle of a scan, must not come in between.
      if (modified || buffer.pace() === 'fast') event.preventDefault()
    }
    if (modified) return
    if (!taken) {
      giveTyped()
      if (onTyped(key)) event.preventDefault()
      return
    }
    if (onControl && key === ' ') return
    pending.push(key)
    clearTimeout(typed)
    // While the keys come as fast as a scanner's, they wait for the end of the burst.
    if (buffer.pace() === 'typing') typed = setTimeout(giveTyped, TYPED_AFTER_MS)
  }

  function dispose(): void {
    clearTimeout(silence)
    clearTimeout(typed)
    buffer.clear()
    pending = []
  }

  return { handle, dispose }
}
