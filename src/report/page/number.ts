/** Narrow no-break space: groups digits and joins a number to its unit, so that neither breaks over a line. */
const GROUP = '\u202f'
const JOIN = '\u00a0'

/**
 * A computed number to `digits` significant figures, as the screen and the note show it: thousands grouped, plain
 * decimals from a millionth to a thousand millions, a power of ten beyond. Files carry full precision instead.
 */
export function significant(x: number, digits = 3): string {
  if (!Number.isFinite(x)) throw new RangeError(`cannot show ${x} as a number`)
  if (x === 0) return '0'
  const rounded = Number(x.toPrecision(digits))
  const size = Math.abs(rounded)
  if (size < 1e-6 || size >= 1e9) return rounded.toExponential(digits - 1).replace('e+', 'e')
  const decimals = Math.max(0, digits - 1 - Math.floor(Math.log10(size) + 1e-12))
  return grouped(rounded.toFixed(Math.min(decimals, 20)))
}

/** A number that was typed: every digit that was typed and no more (12 significant, so that 0.1 + 0.2 is 0.3). */
export function typed(x: number): string {
  return grouped(plainDecimal(Number(x.toPrecision(12))))
}

/** A time of a table: seven figures tell any two rows apart, and 10 s is 0.1666667 min. */
export function timeFigures(x: number): string {
  return grouped(plainDecimal(Number(x.toPrecision(7))))
}

/** A number as it was typed where three figures hold it, else to three significant figures. */
export function brief(x: number): string {
  return Number(x.toPrecision(3)) === x ? typed(x) : significant(x)
}

/** A share of time or exposure in per cent. A share that is not quite whole or none is never rounded to 100 or 0. */
export function percent(share: number): string {
  if (share > 0 && share < 0.001) return `under${JOIN}0.1${JOIN}%`
  if (share < 1 && share > 0.9995) return `over${JOIN}99.9${JOIN}%`
  const digits = significant(100 * share)
  return `${digits.includes('.') ? digits.replace(/\.?0+$/, '') : digits}${JOIN}%`
}

/** Number and unit, kept on one line; a number without a unit stands alone. */
export function withUnit(number: string, unit: string): string {
  const shown = shownUnit(unit)
  return shown === '' ? number : `${number}${JOIN}${shown}`
}

/** A UCUM unit as people write it: `mg.h/L` is mg·h/L, `{1.73_m2}` is 1.73 m². */
export function shownUnit(unit: string): string {
  if (unit === '1') return ''
  return unit
    .replace('{1.73_m2}', `1.73${JOIN}m²`)
    .replace(/^u(g|mol)/, 'µ$1')
    .replace(/\bm2\b/, 'm²')
    .replaceAll('.h', '·h')
}

function grouped(number: string): string {
  const [whole = '', fraction] = number.split('.')
  const digits = whole.replace('-', '')
  const split = digits.length > 3 ? digits.replace(/\B(?=(\d{3})+$)/g, GROUP) : digits
  return `${number.startsWith('-') ? '−' : ''}${split}${fraction === undefined ? '' : `.${fraction}`}`
}

function plainDecimal(x: number): string {
  const short = String(x)
  return short.includes('e') ? x.toFixed(20).replace(/\.?0+$/, '') : short
}
