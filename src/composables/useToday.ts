import type { Today } from '#shared/contracts/replenishment.ts'
import { readToday } from '#shared/contracts/replenishment.ts'
import { useLoad, type Load } from '#src/composables/useLoad.ts'
import { call } from '#src/services/api.ts'

/** What the signed-in role needs to see first. */
export function useToday(): Load<Today> {
  return useLoad(
    () => 'today',
    (_, signal) => call(readToday, { signal }),
  )
}
