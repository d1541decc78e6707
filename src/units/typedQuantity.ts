import { nearestUnit } from './nearestUnit'
import type { Quantity } from './quantity'
import { type Kind, unitOf, unitsOf } from './unitTable'

/** What a person typed in place of a quantity: understood, or what is wrong with it and, where one is near, an offer. */
export type TypedReading =
  | { readonly ok: true; readonly quantity: Quantity }
  | { readonly ok: false; readonly message: string; readonly offer?: Quantity }

const NUMBER = /^([+-]?(?:\d+(?:\.\d*)?|\.\d+)(?:e[+-]?\d{1,3})?)\s*(.*)$/i

/**
 * Read a value, its unit, or both (`1.2 g`, `850`, `umol/L`) typed over a quantity of a kind: a number alone keeps the unit
 * that stood there, a unit alone keeps the number and converts nothing. A unit that is no UCUM code of the kind is not
 * guessed: the nearest spelling is offered instead. A comma is refused, since it stands for the decimal point in one
 * country and for thousands in another.
 */
export function readTypedQuantity(text: string, kind: Kind, before: Quantity): TypedReading {
  const typed = text.trim()
  if (typed === '') return { ok: false, message: 'type a number, a unit or both' }
  const match = NUMBER.exec(typed)
  const digits = match?.[1]
  const rest = match === null ? typed : (match[2] ?? '')
  if (/^[+-]?[\d.]*,/.test(typed)) return comma(typed, kind, before)
  if (digits === undefined && /^[+-]?\d/.test(typed)) return { ok: false, message: `"${typed}" is not a number` }
  const value = digits === undefined ? before.value : Number(digits)
  if (!Number.isFinite(value)) return { ok: false, message: `${digits} is too large to be a number here` }
  const unit = rest === '' ? before.unit : rest
  if (unitOf(kind, unit) !== undefined) return { ok: true, quantity: { value, unit } }
  const nearest = nearestUnit(kind, unit)
  if (nearest !== undefined) {
    const offer = { value, unit: nearest }
    return { ok: false, message: `${nearest}?`, offer }
  }
  const accepted = unitsOf(kind)
    .slice(0, 8)
    .map(({ code }) => code)
    .join(', ')
  return { ok: false, message: `"${unit}" is not a unit of this value; use ${accepted}` }
}

/** A decimal point is offered where the comma can have been one. */
function comma(typed: string, kind: Kind, before: Quantity): TypedReading {
  const message = 'write a decimal point, and no separators in thousands'
  const parts = typed.split(',')
  if (parts.length !== 2) return { ok: false, message }
  const read = readTypedQuantity(parts.join('.'), kind, before)
  const offer = read.ok ? read.quantity : read.offer
  return { ok: false, message, ...(offer !== undefined && { offer }) }
}
