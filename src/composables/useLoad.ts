import { onScopeDispose, ref, shallowRef, watch, type Ref, type ShallowRef, type WatchSource } from 'vue'

export interface Load<T> {
  data: ShallowRef<T | null>
  error: Ref<unknown>
  loading: Ref<boolean>
  reload: () => Promise<void>
}

/**
 * Loads something whenever its key changes. Of two loads on their way only the later one counts; what was shown stays
 * until the next arrives, and a failed reload keeps it beside the error.
 */
export function useLoad<K, T>(key: WatchSource<K>, work: (key: K, signal: AbortSignal) => Promise<T>): Load<T> {
  const data = shallowRef<T | null>(null)
  const error = ref<unknown>(null)
  const loading = ref(false)
  let current: AbortController | null = null
  let last: K

  async function load(next: K): Promise<void> {
    last = next
    current?.abort()
    const mine = new AbortController()
    current = mine
    loading.value = true
    try {
      const value = await work(next, mine.signal)
      if (current !== mine) return
      data.value = value
      error.value = null
    } catch (cause) {
      if (current === mine) error.value = cause
    } finally {
      if (current === mine) loading.value = false
    }
  }

  watch(key, (next) => void load(next), { immediate: true })
  onScopeDispose(() => current?.abort())
  return { data, error, loading, reload: () => load(last) }
}
