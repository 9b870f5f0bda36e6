import type { SyncState } from '#src/services/sync.ts'
import { attentionWords } from '#src/i18n/en.ts'

/** What sending is doing, in a sentence; empty when there is nothing to say. */
export function syncWords(state: SyncState, unsent: number): string {
  const words = attentionWords.sync[state.phase]
  return typeof words === 'function' ? words(unsent) : words
}
