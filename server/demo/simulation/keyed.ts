import { seededRandom, type Random } from '#shared/kernel/random.ts'
import { demoSeed } from '../bin-plan.ts'

/**
 * A random source for one thing that happens: the same name gives the same draws in every run, so a history that is
 * lived in pieces does not depend on where it was cut.
 */
export const keyed = (...name: (string | number)[]): Random => seededRandom(`${demoSeed}/${name.join('/')}`)

/** UUIDv7 of a moment whose random part follows from a name. Layout: RFC 9562, 5.7. */
export function operationId(at: number, ...name: (string | number)[]): string {
  const random = keyed('op', at, ...name)
  const hex = (digits: number): string => {
    let text = ''
    while (text.length < digits) text += Math.floor(random() * 16).toString(16)
    return text
  }
  const time = at.toString(16).padStart(12, '0')
  const variant = '89ab'.charAt(Math.floor(random() * 4))
  return `${time.slice(0, 8)}-${time.slice(8)}-7${hex(3)}-${variant}${hex(3)}-${hex(12)}`
}
