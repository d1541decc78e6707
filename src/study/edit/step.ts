const NUMBER = /^\s*([+-]?)(\d+(?:\.\d*)?|\.\d+)(?=\s*[^\d.e,]|\s*$)/

/** Text whose number an arrow key has moved, and the power of ten of the step that the next key takes. */
export interface Stepped {
  readonly text: string
  readonly power: number
}

/**
 * How far an arrow key moves a typed number: 10 to this power, that of its last significant digit; where that is the first
 * digit of a number from 10 on, a tenth of it (500 -> 510, 20 -> 21). Undefined without a number.
 */
export function stepOf(text: string): number | undefined {
  const digits = NUMBER.exec(text)?.[2]
  if (digits === undefined) return undefined
  const [whole = '', fraction = ''] = digits.split('.')
  if (fraction !== '') return -fraction.length
  const zeros = /[1-9](0*)$/.exec(whole)?.[1]?.length ?? 0
  return zeros > 0 && /^0*[1-9]0*$/.test(whole) ? zeros - 1 : zeros
}

/**
 * The text with its number moved by `count` steps of 10^power, its unit kept: `1.6 mg/dL` up by one is `1.7 mg/dL`.
 * A number over 0 does not step to 0 or below: there the step becomes a tenth, 1 -> 0.9.
 */
export function stepped(text: string, power: number, count: number): Stepped {
  const match = NUMBER.exec(text)
  if (match === null) return { text, power }
  const before = Number(`${match[1]}${match[2]}`)
  const decimals = (match[2]?.split('.')[1] ?? '').length
  for (let exponent = power; exponent >= power - 2; exponent--) {
    const moved = (before + count * Number(`1e${exponent}`)).toFixed(Math.max(decimals, -exponent, 0))
    if (before <= 0 || Number(moved) > 0) return { text: `${moved}${text.slice(match[0].length)}`, power: exponent }
  }
  return { text, power }
}
