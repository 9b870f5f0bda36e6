/**
 * A figure as people read it: thousands with commas, at most `digits` decimals, no trailing zeros, no "-0".
 *
 * @example figure(1234.5) // => '1,234.5'
 */
export function figure(value: number, digits = Math.abs(value) < 1 ? 3 : 2): string {
  const fixed = Math.abs(value).toFixed(digits)
  const point = fixed.indexOf('.')
  const whole = point < 0 ? fixed : fixed.slice(0, point)
  let end = fixed.length
  if (point >= 0) while (fixed[end - 1] === '0') end--
  const decimals = point >= 0 && end > point + 1 ? fixed.slice(point, end) : ''
  const text = (whole.length > 3 ? whole.replace(/\B(?=(\d{3})+$)/g, ',') : whole) + decimals
  return value < 0 && text !== '0' ? `-${text}` : text
}
