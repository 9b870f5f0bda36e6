/**
 * A figure as people read it: thousands with commas, at most `digits` decimals, no trailing zeros, no "-0".
 *
 * @example figure(1234.5) // => '1,234.5'
 */
export function figure(value: number, digits = Math.abs(value) < 1 ? 3 : 2): string {
  const fixed = Math.abs(value).toFixed(digits)
  const [whole = '0', decimals = ''] = fixed.split('.')
  const kept = decimals.replace(/0+$/, '')
  const text = whole.replace(/\B(?=(\d{3})+$)/g, ',') + (kept ? `.${kept}` : '')
  return value < 0 && /[1-9]/.test(text) ? `-${text}` : text
}
