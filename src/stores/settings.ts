import { Dark } from 'quasar'
import { defineStore } from 'pinia'
import { computed, ref, watch } from 'vue'

export type Theme = 'auto' | 'light' | 'dark'

// The same key and shape are read by public/theme.js before the first paint.
const KEY = 'brimline.settings'

interface Stored {
  theme?: Theme
  leftHand?: boolean
  largeKeys?: boolean
}

function read(): Stored {
  try {
    return (JSON.parse(localStorage.getItem(KEY) ?? '{}') as Stored | null) ?? {}
  } catch {
    return {}
  }
}

/** How this device shows things. Kept on the device, not with the person. */
export const useSettingsStore = defineStore('settings', () => {
  const stored = read()
  const theme = ref<Theme>(stored.theme === 'light' || stored.theme === 'dark' ? stored.theme : 'auto')
  const leftHand = ref(stored.leftHand === true)
  const largeKeys = ref(stored.largeKeys === true)
  const night = window.matchMedia('(prefers-color-scheme: dark)')
  const phoneIsDark = ref(night.matches)
  night.addEventListener('change', (event) => (phoneIsDark.value = event.matches))

  const dark = computed(() => theme.value === 'dark' || (theme.value === 'auto' && phoneIsDark.value))

  function apply(): void {
    const root = document.documentElement
    root.dataset.theme = dark.value ? 'dark' : 'light'
    if (leftHand.value) root.dataset.hand = 'left'
    else delete root.dataset.hand
    if (largeKeys.value) root.dataset.keys = 'large'
    else delete root.dataset.keys
    document.querySelector('meta[name="theme-color"]')?.setAttribute('content', dark.value ? '#0D151A' : '#F3F6F5')
    Dark.set(dark.value)
  }

  function keep(): void {
    try {
      const value: Stored = { theme: theme.value, leftHand: leftHand.value, largeKeys: largeKeys.value }
      localStorage.setItem(KEY, JSON.stringify(value))
    } catch {
      // The choice then holds until the page is closed.
    }
  }

  /** One tap: light to dark and back, from whatever is shown now. */
  function toggleNight(): void {
    theme.value = dark.value ? 'light' : 'dark'
  }

  watch([dark, leftHand, largeKeys], apply, { immediate: true })
  watch([theme, leftHand, largeKeys], keep)

  return { theme, leftHand, largeKeys, dark, toggleNight }
})
