import { computed, ref, type ComputedRef, type Ref } from 'vue'
import { Problem } from '#shared/kernel/problem.ts'

export interface Action<A extends unknown[], R> {
  run: (...args: A) => Promise<R | undefined>
  busy: Ref<boolean>
  error: Ref<unknown>
  /** Sentences of a refused request by field name, the first segment of each pointer. */
  fields: ComputedRef<Record<string, string>>
  /** What went wrong apart from single fields, which say it themselves. */
  general: ComputedRef<unknown>
  /** Forgets what went wrong, before it is tried anew. */
  clear: () => void
}

/**
 * Runs one thing at a time and keeps what went wrong for the page to show. A second call while one is on its way is
 * ignored, so a double tap sends once.
 */
export function useAction<A extends unknown[], R>(work: (...args: A) => Promise<R>): Action<A, R> {
  const busy = ref(false)
  const error = ref<unknown>(null)
  const fields = computed(() => {
    const found: Record<string, string> = {}
    if (!(error.value instanceof Problem)) return found
    for (const { pointer, detail } of error.value.errors ?? []) {
      const name = pointer.split('/').filter(Boolean).join('-')
      if (name) found[name] ??= detail
    }
    return found
  })
  const general = computed(() => (Object.keys(fields.value).length ? null : error.value))
  async function run(...args: A): Promise<R | undefined> {
    if (busy.value) return undefined
    busy.value = true
    error.value = null
    try {
      return await work(...args)
    } catch (cause) {
      error.value = cause
      return undefined
    } finally {
      busy.value = false
    }
  }
  const clear = (): void => {
    error.value = null
  }
  return { run, busy, error, fields, general, clear }
}
