import { nextTick, onScopeDispose, type Ref } from 'vue'
import { useRouter } from 'vue-router'

/**
 * The scrolling page starts at its top on a new address and returns to where it was on the way back, and the focus goes
 * with it. The browser does this only for whole documents.
 */
export function useScrollMemory(page: Readonly<Ref<HTMLElement | null>>): void {
  const router = useRouter()
  const kept = new Map<string, number>()
  let goingBack = false
  const back = (): void => {
    goingBack = true
  }
  window.addEventListener('popstate', back)
  const stopBefore = router.beforeEach((_to, from) => {
    if (page.value) kept.set(from.fullPath, page.value.scrollTop)
  })
  const stopAfter = router.afterEach(async (to, from) => {
    const top = goingBack ? (kept.get(to.fullPath) ?? 0) : 0
    goingBack = false
    if (to.path === from.path) return
    await nextTick()
    if (!page.value) return
    page.value.scrollTop = top
    // What was pressed may be gone; reading and tabbing go on from the new page, not from the top of the window.
    if (!page.value.contains(document.activeElement)) page.value.focus({ preventScroll: true })
  })
  onScopeDispose(() => {
    window.removeEventListener('popstate', back)
    stopBefore()
    stopAfter()
  })
}
