import { ref, shallowRef } from 'vue'
import { readScan } from '#shared/barcode/read-scan.ts'
import type { Gs1Scan, ScanResult } from '#shared/barcode/scan-result.ts'
import { countWords, scanWords } from '#src/i18n/en.ts'
import { useCountingStore } from '#src/stores/counting.ts'
import { useRoomsCacheStore } from '#src/stores/rooms-cache.ts'
import { useTick } from './useTick.ts'

/** Something said over the camera window; with `ways` it waits for an answer, else it goes by itself. */
export interface ScanNotice {
  text: string
  ways: { label: string; act: () => void }[]
}

const SHOWN_MS = 5_000
const MISPRINT = 3

/** What a scan means for the round in hand: the place it names, or a sentence that says what to do. */
export function useCountScan(goToRoom: (roomId: string, binId: string) => void) {
  const counting = useCountingStore()
  const rooms = useRoomsCacheStore()
  const tick = useTick()
  const notice = shallowRef<ScanNotice | null>(null)
  const misreads = ref<{ text: string; times: number }>({ text: '', times: 0 })
  let timer: ReturnType<typeof setTimeout> | undefined

  function say(text: string, ways: ScanNotice['ways'] = []): void {
    clearTimeout(timer)
    notice.value = { text, ways }
    if (ways.length === 0) timer = setTimeout(hush, SHOWN_MS)
  }
  function hush(): void {
    clearTimeout(timer)
    notice.value = null
  }

  function misread(text: string): void {
    tick.misread()
    const times = misreads.value.text === text ? misreads.value.times + 1 : 1
    misreads.value = { text, times }
    say(times >= MISPRINT ? scanWords.misprinted : scanWords.misread)
  }

  function arrive(binId: string): void {
    hush()
    tick.read()
    counting.go(binId)
  }

  /** To the place with a shelf code, scanned or typed. */
  async function toCode(code: string, display: string): Promise<void> {
    const roomId = counting.roomId
    if (!roomId) return
    const found = await rooms.findCode(code, roomId)
    if (found?.roomId === roomId) return arrive(found.binId)
    tick.misread()
    const stay = { label: scanWords.stay, act: hush }
    if (!found) {
      const anyway = (): void => {
        hush()
        counting.goUnknown(code, display)
      }
      return say(scanWords.unknown(display), [{ label: scanWords.countAnyway, act: anyway }, stay])
    }
    const room = rooms.rooms?.find((one) => one.id === found.roomId)?.name ?? scanWords.anotherRoom
    const there = (): void => {
      hush()
      goToRoom(found.roomId, found.binId)
    }
    say(scanWords.otherRoom(display, room), [{ label: scanWords.goThere, act: there }, stay])
  }

  function toItem(scan: Gs1Scan): void {
    if (scan.attrs.recipientId || scan.attrs.providerId) return say(scanWords.person)
    if (!scan.gtin) return say(scanWords.delivery)
    const places = counting.roomId ? rooms.findGtin(scan.gtin, counting.roomId) : []
    const next = places.find((id) => !counting.round?.done[id]) ?? places[0]
    if (!next) return say(scanWords.noPlaceForItem)
    arrive(next)
    if (places.length > 1) say(scanWords.severalPlaces(places.length))
  }

  function act(result: ScanResult, text: string): void {
    if (result.kind === 'shelf') return void toCode(result.code, result.display)
    if (result.kind === 'gs1') return toItem(result)
    if (result.kind === 'error' && ['check-char', 'check-digit', 'date-invalid'].includes(result.error))
      return misread(text)
    if (result.kind === 'error' && result.error === 'two-gtins') return say(scanWords.twoProducts)
    if (result.kind === 'error' && ['too-long', 'empty'].includes(result.error)) return
    say(scanWords.notAPlace)
  }

  /** Takes a scan as the engine or the scanner handed it over. */
  function take(text: string, format?: string): void {
    const today = new Date().toISOString().slice(0, 10)
    act(readScan(text, { today, ownHosts: [location.host], format }), text)
  }

  /** Says aloud, for screen readers, what was saved; the eyes see the next place. */
  const spoken = ref('')
  function saved(name: string, quantity: number, unit: string): void {
    tick.saved()
    spoken.value = countWords.saved(name, quantity, unit)
  }

  return { notice, spoken, take, toCode, hush, saved, tick }
}
