import type { OutboxEntry } from '#shared/stored/outbox/index.ts'

/** A file with every entry as it is kept, so that nothing exists on one phone only. */
export function exportEntries(entries: readonly OutboxEntry[], now: string): void {
  const open = entries.filter((entry) => entry.state !== 'acked')
  const body = JSON.stringify({ exportedAt: now, entries: open.length > 0 ? open : entries }, null, 2)
  const url = URL.createObjectURL(new Blob([body], { type: 'application/json' }))
  const link = document.createElement('a')
  link.href = url
  link.download = `brimline-entries-${now.slice(0, 10)}.json`
  link.click()
  URL.revokeObjectURL(url)
}
