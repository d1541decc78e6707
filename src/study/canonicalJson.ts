/**
 * The canonical form of a JSON value (RFC 8785): keys sorted by UTF-16 code units, no blanks, numbers and texts as
 * ECMAScript writes them. Throws `RangeError` for what JSON cannot hold (a non-finite number, half of a surrogate pair).
 */
export function canonicalJson(value: unknown): string {
  if (value === null || typeof value === 'boolean') return String(value)
  if (typeof value === 'string') return text(value)
  if (typeof value === 'number') {
    if (!Number.isFinite(value)) throw new RangeError(`JSON holds no ${value}`)
    return JSON.stringify(value)
  }
  if (Array.isArray(value)) return `[${value.map(canonicalJson).join(',')}]`
  if (typeof value !== 'object') throw new RangeError(`JSON holds no ${typeof value}`)
  // The default order of `sort` is that of UTF-16 code units, as the standard asks.
  const members = Object.entries(value).sort(([a], [b]) => (a < b ? -1 : 1))
  return `{${members.map(([key, member]) => `${text(key)}:${canonicalJson(member)}`).join(',')}}`
}

function text(value: string): string {
  const written = JSON.stringify(value)
  if (/\\ud[89ab][0-9a-f]{2}|\\ud[c-f][0-9a-f]{2}/.test(written.replaceAll('\\\\', ''))) {
    throw new RangeError('half of a surrogate pair is no character')
  }
  return written
}
