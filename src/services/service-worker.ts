/**
 * A newer version waits until the person is between two places: the screen offers it, nothing reloads by itself.
 * Registered by hand, because an inline script would need a wider content security policy.
 */
const CHECK_EVERY_MS = 3_600_000

let waiting: ServiceWorker | null = null
let reloading = false

/** Registers the worker; `onWaiting` is told when a newer version is ready to be used. */
export async function registerWorker(onWaiting: () => void): Promise<void> {
  if (!('serviceWorker' in navigator) || !import.meta.env.PROD) return
  const offer = (worker: ServiceWorker | null): void => {
    // Without a controller it is the first visit: there is no older version to leave.
    if (!worker || !navigator.serviceWorker.controller) return
    waiting = worker
    onWaiting()
  }
  try {
    const registration = await navigator.serviceWorker.register('/sw.js', { scope: '/' })
    offer(registration.waiting)
    registration.addEventListener('updatefound', () => {
      const next = registration.installing
      next?.addEventListener('statechange', () => {
        if (next.state === 'installed') offer(next)
      })
    })
    setInterval(() => void registration.update().catch(() => undefined), CHECK_EVERY_MS)
  } catch {
    // Without a worker the program still works with a network, and entries are kept all the same.
  }
}

/** Uses the newer version now and loads the page anew once it is in charge. Call it only when nothing is half typed. */
export function useNewVersion(): void {
  if (!waiting) return
  navigator.serviceWorker.addEventListener('controllerchange', () => {
    if (reloading) return
    reloading = true
    location.reload()
  })
  waiting.postMessage({ type: 'SKIP_WAITING' })
}

/** Asks the browser to protect what is kept here, once, on a person's own action; true when it does. */
export async function protectStorage(): Promise<boolean> {
  try {
    if (await navigator.storage.persisted()) return true
    return await navigator.storage.persist()
  } catch {
    return false
  }
}
