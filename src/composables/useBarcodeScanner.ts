import { onBeforeUnmount, ref, type Ref } from 'vue'
import type { DecodeReply, DecodeRequest } from '#src/workers/decode.worker.ts'
import type { Decoded } from '#src/workers/decoder.ts'
import DecodeWorker from '#src/workers/decode.worker.ts?worker'
import { makeSteady, pause, viewfinder } from './scan-frames.ts'

/**
 * `resting`: stopped after 30 seconds without a read, to spare heat and battery; one tap starts it again.
 * The others say why there is no camera, each with its own sentence and way out.
 */
export type CameraState = 'off' | 'starting' | 'on' | 'resting' | 'refused' | 'none' | 'busy' | 'insecure' | 'failed'

const REST_AFTER_MS = 30_000
const STALL_MS = 2_000

function stateOf(error: unknown): CameraState {
  const name = error instanceof DOMException ? error.name : ''
  if (name === 'NotAllowedError' || name === 'SecurityError') return 'refused'
  if (name === 'NotFoundError' || name === 'OverconstrainedError') return 'none'
  if (name === 'NotReadableError' || name === 'AbortError') return 'busy'
  return 'failed'
}

/**
 * The camera as a scanner. We own the stream: the picture is cropped to the viewfinder and decoded in a worker; the
 * tracks stop when the page is hidden and start anew when it is shown, for a camera that slept shows a black picture.
 */
export function useBarcodeScanner(video: Ref<HTMLVideoElement | null>, onRead: (code: Decoded) => void) {
  const state = ref<CameraState>('off')
  const torch = ref<'none' | 'off' | 'on'>('none')
  let stream: MediaStream | null = null
  let worker: Worker | null = null
  let loop = 0
  let restarted = false
  let readAt = 0

  const track = (): MediaStreamTrack | undefined => stream?.getVideoTracks()[0]

  function release(): void {
    loop += 1
    for (const one of stream?.getTracks() ?? []) {
      one.onended = null
      one.stop()
    }
    stream = null
    torch.value = 'none'
    if (video.value) video.value.srcObject = null
  }

  function stop(): void {
    release()
    state.value = 'off'
  }

  /** One attempt: a crop of the present frame, given to the worker. */
  async function attempt(element: HTMLVideoElement, rung: number, id: number): Promise<DecodeReply> {
    const region = viewfinder(
      { width: element.videoWidth, height: element.videoHeight },
      { width: element.clientWidth || element.videoWidth, height: element.clientHeight || element.videoHeight },
    )
    const frame = await createImageBitmap(element, region.x, region.y, region.width, region.height)
    const eye = (worker ??= new DecodeWorker())
    return new Promise((resolve, reject) => {
      eye.onmessage = (event: MessageEvent<DecodeReply>) => {
        if (event.data.id === id) resolve(event.data)
      }
      eye.onerror = reject
      eye.postMessage({ id, frame, rung } satisfies DecodeRequest, [frame])
    })
  }

  async function look(element: HTMLVideoElement, mine: number): Promise<void> {
    const steady = makeSteady()
    let rung = 0
    let movedAt = Date.now()
    let position = -1
    readAt = Date.now()
    for (let id = 1; mine === loop; id += 1) {
      const now = Date.now()
      if (element.currentTime !== position) {
        position = element.currentTime
        movedAt = now
      }
      if (now - movedAt > STALL_MS) return lost()
      if (now - readAt > REST_AFTER_MS) {
        release()
        state.value = 'resting'
        return
      }
      if (element.videoWidth === 0) {
        await new Promise((resolve) => setTimeout(resolve, 50))
        continue
      }
      const reply = await attempt(element, rung, id).catch(() => null)
      if (mine !== loop) return
      rung = reply?.found ? 0 : rung + 1
      const read = steady(reply?.found ?? null, Date.now())
      if (read) {
        readAt = Date.now()
        onRead(read)
      }
      await new Promise((resolve) => setTimeout(resolve, pause(reply?.took ?? 0)))
    }
  }

  /** A picture that stopped by itself is fetched anew once; then the person is asked. */
  function lost(): void {
    release()
    if (restarted) {
      state.value = 'failed'
      return
    }
    restarted = true
    void start()
  }

  async function open(): Promise<MediaStream> {
    return navigator.mediaDevices.getUserMedia({
      audio: false,
      video: {
        facingMode: { ideal: 'environment' },
        width: { ideal: 1920 },
        height: { ideal: 1080 },
        frameRate: { ideal: 30 },
      },
    })
  }

  /** What the lens can do, asked for only after it was listed: never in the first call. */
  async function tune(): Promise<void> {
    const lens = track()
    const can = (lens?.getCapabilities?.() ?? {}) as { torch?: boolean; focusMode?: string[] }
    torch.value = can.torch ? 'off' : 'none'
    if (!can.focusMode?.includes('continuous')) return
    await lens?.applyConstraints({ advanced: [{ focusMode: 'continuous' } as MediaTrackConstraintSet] }).catch(() => {})
  }

  async function start(): Promise<void> {
    const element = video.value
    if (!element || state.value === 'starting') return
    if (!window.isSecureContext || !('mediaDevices' in navigator)) {
      state.value = window.isSecureContext ? 'none' : 'insecure'
      return
    }
    release()
    const mine = loop
    state.value = 'starting'
    try {
      const opened = await open()
      if (mine !== loop) return opened.getTracks().forEach((one) => one.stop())
      stream = opened
      const lens = track()
      if (lens) lens.onended = lost
      // iOS reads these as properties only.
      element.muted = true
      element.playsInline = true
      element.srcObject = stream
      await element.play()
      state.value = 'on'
      void tune()
      void look(element, mine)
    } catch (error) {
      release()
      state.value = stateOf(error)
    }
  }

  async function toggleTorch(): Promise<void> {
    if (torch.value === 'none') return
    const next = torch.value === 'off'
    const wanted = { advanced: [{ torch: next } as MediaTrackConstraintSet] }
    await track()
      ?.applyConstraints(wanted)
      .then(() => (torch.value = next ? 'on' : 'off'))
      .catch(() => undefined)
  }

  let wasOn = false
  function onVisibility(): void {
    if (document.visibilityState === 'hidden') {
      wasOn = state.value === 'on' || state.value === 'starting'
      if (wasOn) stop()
      return
    }
    restarted = false
    if (wasOn) void start()
  }
  document.addEventListener('visibilitychange', onVisibility)
  onBeforeUnmount(() => {
    document.removeEventListener('visibilitychange', onVisibility)
    stop()
    worker?.terminate()
  })

  /** The person is at work: the camera does not rest. */
  const touch = (): void => {
    readAt = Date.now()
  }
  return { state, torch, start, stop, toggleTorch, touch }
}
