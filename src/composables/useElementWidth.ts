import { onScopeDispose, ref, watch, type Ref } from 'vue'

const widths = new Map<Element, Ref<number>>()
let observer: ResizeObserver | null = null

/** One observer for all gauges of a page: a room can have a hundred. */
function shared(): ResizeObserver | null {
  if (typeof ResizeObserver === 'undefined') return null
  observer ??= new ResizeObserver((entries) => {
    for (const entry of entries) {
      const width = widths.get(entry.target)
      if (width) width.value = entry.contentRect.width
    }
  })
  return observer
}

/** The width of an element in CSS pixels, kept up to date; 0 before it is measured. */
export function useElementWidth(element: Readonly<Ref<HTMLElement | null>>): Readonly<Ref<number>> {
  const width = ref(0)
  let watched: Element | null = null
  function stop(): void {
    if (!watched) return
    observer?.unobserve(watched)
    widths.delete(watched)
    watched = null
  }
  watch(
    element,
    (next) => {
      stop()
      if (!next) return
      watched = next
      widths.set(next, width)
      width.value = next.getBoundingClientRect().width
      shared()?.observe(next)
    },
    { immediate: true, flush: 'post' },
  )
  onScopeDispose(stop)
  return width
}
