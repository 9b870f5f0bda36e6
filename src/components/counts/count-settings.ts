/** How this device counts: kept on the device, not with the person. */
const KEY = 'brimline.count'

interface Stored {
  camera?: boolean
  list?: boolean
}

function read(): Stored {
  try {
    return (JSON.parse(localStorage.getItem(KEY) ?? '{}') as Stored | null) ?? {}
  } catch {
    return {}
  }
}

function write(change: Stored): void {
  try {
    localStorage.setItem(KEY, JSON.stringify({ ...read(), ...change }))
  } catch {
    // The choice then holds until the page is closed.
  }
}

/** Whether the camera was used on this device before. */
export const cameraWanted = (): boolean => read().camera === true
export const rememberCamera = (camera: boolean): void => write({ camera })

/** Whether the last round was walked by the list. */
export const listWanted = (): boolean => read().list === true
export const rememberList = (list: boolean): void => write({ list })
