import { useOutboxStore } from '#src/stores/outbox.ts'
import { useUpdateStore } from '#src/stores/update.ts'

/** Starts what works behind every page: keeping and sending entries, and the worker that keeps the program itself. */
export function startOffline(): void {
  useOutboxStore().start()
  void useUpdateStore().watchForUpdates()
}
