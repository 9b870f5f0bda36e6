/**
 * A short tone and a short buzz when something was saved, two low ones for a misread. Both can be switched off; until
 * somebody chooses, there is no tone in night colours, because people sleep there.
 */
const KEY = 'brimline.tick'

let audio: AudioContext | null = null

export interface TickSettings {
  sound: boolean
  buzz: boolean
}

const byDay = (): boolean => document.documentElement.dataset.theme !== 'dark'

export function readTick(): TickSettings {
  try {
    const stored = JSON.parse(localStorage.getItem(KEY) ?? '{}') as Partial<TickSettings>
    return { sound: stored.sound ?? byDay(), buzz: stored.buzz !== false }
  } catch {
    return { sound: byDay(), buzz: true }
  }
}

/** Keeps what was chosen on this device; what was not chosen stays as it was. */
export function writeTick(choice: Partial<TickSettings>): void {
  try {
    const stored = JSON.parse(localStorage.getItem(KEY) ?? '{}') as Partial<TickSettings>
    localStorage.setItem(KEY, JSON.stringify({ ...stored, ...choice }))
  } catch {
    // The choice then holds until the page is closed.
  }
}

function tone(frequency: number, at: number): void {
  if (!audio) return
  const oscillator = audio.createOscillator()
  const gain = audio.createGain()
  oscillator.frequency.value = frequency
  gain.gain.setValueAtTime(0.06, audio.currentTime + at)
  gain.gain.exponentialRampToValueAtTime(0.001, audio.currentTime + at + 0.08)
  oscillator.connect(gain).connect(audio.destination)
  oscillator.start(audio.currentTime + at)
  oscillator.stop(audio.currentTime + at + 0.09)
}

export function useTick() {
  /** Sound needs a tap first; call this from one. */
  function wake(): void {
    if (typeof AudioContext === 'undefined') return
    audio ??= new AudioContext()
    void audio.resume().catch(() => undefined)
  }

  function play(frequencies: number[], buzz: number[]): void {
    const settings = readTick()
    if (settings.sound) frequencies.forEach((frequency, i) => tone(frequency, i * 0.11))
    if (settings.buzz) navigator.vibrate?.(buzz)
  }

  return {
    wake,
    saved: () => play([1320], [12]),
    read: () => play([1760], [8]),
    misread: () => play([330, 262], [30, 60, 30]),
  }
}
