import { defineStore } from 'pinia'
import { ref } from 'vue'
import { registerWorker, useNewVersion } from '#src/services/service-worker.ts'

/** Whether a newer version waits. It is used only when a person says so, and only between two places. */
export const useUpdateStore = defineStore('update', () => {
  const ready = ref(false)
  const watchForUpdates = (): Promise<void> => registerWorker(() => (ready.value = true))
  return { ready, watchForUpdates, use: useNewVersion }
})
