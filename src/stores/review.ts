import { defineStore } from 'pinia'
import { ref, shallowRef } from 'vue'
import {
  decideProposal,
  endServiceLevel,
  listReview,
  readBinPolicy,
  readClassOutlook,
  setServiceLevel,
  type BinPolicy,
  type ClassOutlook,
  type ReviewRow,
} from '#shared/contracts/policy.ts'
import { call } from '#src/services/api.ts'
import { everyPage } from '#src/services/every-page.ts'
import type { ReviewShow } from '#src/i18n/en.ts'
import { useSessionStore } from './session.ts'

export interface AimChange {
  level: number
  reason: string
  policyReference: string
  reviewBy: string
}

/** Places with their aims, and the decisions about them. */
export const useReviewStore = defineStore('review', () => {
  const rows = shallowRef<ReviewRow[] | null>(null)
  const show = ref<ReviewShow>('vital')
  const classes = shallowRef<ClassOutlook[] | null>(null)

  async function loadRows(filter: { show: ReviewShow; roomId?: string }, signal?: AbortSignal): Promise<void> {
    rows.value = await everyPage((page) => call(listReview, { query: { ...filter, page, pageSize: 500 }, signal }))
  }

  async function loadClasses(signal?: AbortSignal): Promise<void> {
    classes.value = (await call(readClassOutlook, { signal })).items
  }

  const policyOf = (binId: string, signal?: AbortSignal): Promise<BinPolicy> =>
    call(readBinPolicy, { params: { id: binId }, signal })

  const setAim = (binId: string, change: AimChange): Promise<BinPolicy> =>
    call(setServiceLevel, { params: { id: binId }, body: change })

  const endAim = (binId: string): Promise<BinPolicy> => call(endServiceLevel, { params: { id: binId } })

  const decide = (proposalId: string, decision: 'approve' | 'decline', note: string): Promise<BinPolicy> =>
    call(decideProposal, { params: { id: proposalId }, body: { decision, note } })

  useSessionStore().onClearReads(() => {
    rows.value = null
    classes.value = null
  })

  return { rows, show, classes, loadRows, loadClasses, policyOf, setAim, endAim, decide }
})
