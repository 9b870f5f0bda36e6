import { computed, onScopeDispose, ref, type ComputedRef } from 'vue'
import type { Moment } from '#src/i18n/en.ts'
import { useCatalogueStore } from '#src/stores/catalogue.ts'

const TICK_MS = 30_000

/** The present time, ticking, with the hospital's zone: what dates and ages on a page are said against. */
export function useMoment(): ComputedRef<Moment> {
  const catalogue = useCatalogueStore()
  const now = ref(new Date().toISOString())
  const timer = setInterval(() => (now.value = new Date().toISOString()), TICK_MS)
  onScopeDispose(() => clearInterval(timer))
  return computed(() => ({ now: now.value, zone: catalogue.zone }))
}
