import { onBeforeUnmount, onMounted } from 'vue'
import { makeWedge } from './wedge.ts'

/** A field a person types in: its keys are never watched nor taken away. */
function isField(target: EventTarget | null): boolean {
  if (!(target instanceof HTMLElement)) return false
  if (target.isContentEditable || target.closest('textarea, select')) return true
  return target instanceof HTMLInputElement && !['button', 'checkbox', 'radio', 'submit', 'range'].includes(target.type)
}

const isControl = (target: EventTarget | null): boolean =>
  target instanceof HTMLElement && target.closest('button, a, input') !== null

/**
 * A keyboard scanner, anywhere on the page but in fields, and the digits of a hardware keyboard.
 *
 * @param onTyped one character or `Enter`, `Backspace`, `ArrowUp`, `ArrowDown`; true when the page used it
 */
export function useWedgeScanner(onScan: (text: string) => void, onTyped: (key: string) => boolean = () => false): void {
  const wedge = makeWedge(onScan, onTyped)
  function onKeydown(event: KeyboardEvent): void {
    if (event.isComposing || event.repeat || isField(event.target)) return
    wedge.handle(event, isControl(event.target))
  }
  onMounted(() => document.addEventListener('keydown', onKeydown, { capture: true }))
  onBeforeUnmount(() => {
    document.removeEventListener('keydown', onKeydown, { capture: true })
    wedge.dispose()
  })
}
