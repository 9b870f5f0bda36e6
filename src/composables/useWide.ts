import { onScopeDispose, ref, type Ref } from 'vue'

/** Whether two panes fit: from 1024 CSS px. */
export function useWide(): Ref<boolean> {
  const query = window.matchMedia('(width >= 1024px)')
  const wide = ref(query.matches)
  const follow = (event: MediaQueryListEvent): void => {
    wide.value = event.matches
  }
  query.addEventListener('change', follow)
  onScopeDispose(() => query.removeEventListener('change', follow))
  return wide
}
