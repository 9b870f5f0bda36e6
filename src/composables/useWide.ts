import { onScopeDispose, ref, type Ref } from 'vue'

/** Whether the window is at least so wide; two panes fit from 1024 CSS px. */
export function useWide(from = 1024): Ref<boolean> {
  const query = window.matchMedia(`(width >= ${from}px)`)
  const wide = ref(query.matches)
  const follow = (event: MediaQueryListEvent): void => {
    wide.value = event.matches
  }
  query.addEventListener('change', follow)
  onScopeDispose(() => query.removeEventListener('change', follow))
  return wide
}
