import { onScopeDispose, readonly, ref, type Ref } from 'vue'
import { onContact } from '#src/services/api.ts'

/**
 * Whether the record could not be reached at the last try. The browser's own word counts only for "no network at all":
 * a network without a way to the record looks connected to it.
 */
export function useConnection(): { isOffline: Readonly<Ref<boolean>> } {
  const isOffline = ref(!navigator.onLine)
  const lost = (): void => {
    isOffline.value = true
  }
  const back = (): void => {
    isOffline.value = false
  }
  window.addEventListener('offline', lost)
  window.addEventListener('online', back)
  const stop = onContact({ reply: back, unreached: lost })
  onScopeDispose(() => {
    window.removeEventListener('offline', lost)
    window.removeEventListener('online', back)
    stop()
  })
  return { isOffline: readonly(isOffline) }
}
