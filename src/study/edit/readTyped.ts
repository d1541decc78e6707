import { readTypedQuantity } from '../../units/typedQuantity'
import { quantityProblem } from '../unitProblem'
import { type Place, valueIn } from './place'

/** What was typed at a place: the value for the file (undefined takes it away), or what is wrong and what is near. */
export type TypedAnswer =
  | { readonly ok: true; readonly value: unknown }
  | { readonly ok: false; readonly message: string; readonly offer?: Offer }

/** Text to be typed instead. `spelling`: only the unit is spelled otherwise, nothing is read differently. */
export interface Offer {
  readonly text: string
  readonly spelling: boolean
}

/** The value at a place as text to be edited: `58 kg`, `90 %`. */
export function typedText(place: Place): string {
  switch (place.kind) {
    case 'quantity':
      return withUnit(place.quantity)
    case 'share':
      return `${percentOf(place.share)} %`
    default:
      return String(valueIn(place) ?? '')
  }
}

/** Read what was typed at a place. Nothing is guessed: what is not understood is refused, with what would be near. */
export function readTyped(place: Place, text: string): TypedAnswer {
  switch (place.kind) {
    case 'quantity':
      return readQuantity(place, text)
    case 'share':
      return readShare(place.share, text)
    case 'number':
      return readNumber(text)
    case 'whole':
      return readWhole(text, place.optional)
    case 'choice':
      return place.choices.some(({ value }) => value === text)
        ? { ok: true, value: text }
        : { ok: false, message: `choose one of ${place.choices.map((choice) => choice.text).join(', ')}` }
    case 'text':
      return readText(text, place)
  }
}

function readQuantity(place: Place & { kind: 'quantity' }, text: string): TypedAnswer {
  const { of, quantity, sign, label } = place
  if (of === undefined) return readOwn(place, text)
  const reading = readTypedQuantity(text, of, quantity)
  if (!reading.ok) {
    const { message, offer } = reading
    return {
      ok: false,
      message,
      ...(offer !== undefined && { offer: { text: withUnit(offer), spelling: !text.includes(',') } })
    }
  }
  const problem = quantityProblem(reading.quantity, label, { kind: of, sign })
  return problem === undefined ? { ok: true, value: reading.quantity } : { ok: false, message: problem }
}

/** A unit of the model's own stays: the number alone is typed, or with that very unit. */
function readOwn({ quantity, label, sign }: Place & { kind: 'quantity' }, text: string): TypedAnswer {
  const { unit } = quantity
  const typed = text.trim()
  const number = typed.endsWith(unit) ? typed.slice(0, typed.length - unit.length) : typed
  const value = decimal(number)
  if (value === undefined) return { ok: false, message: `type a number in ${unit}` }
  const problem = quantityProblem({ value, unit }, label, { sign })
  return problem === undefined ? { ok: true, value: { value, unit } } : { ok: false, message: problem }
}

/** A bare number of at most 1 may be meant as a share or in per cent, so that it is asked about. */
function readShare(before: number, text: string): TypedAnswer {
  const reading = readTypedQuantity(text, 'fraction', { value: percentOf(before), unit: '%' })
  if (!reading.ok) {
    const { message, offer } = reading
    return {
      ok: false,
      message,
      ...(offer !== undefined && { offer: { text: withUnit(offer), spelling: !text.includes(',') } })
    }
  }
  const { value, unit } = reading.quantity
  if (value <= 1 && !text.includes('%')) {
    const offer = `${percentOf(value)} %`
    return {
      ok: false,
      message: `${value} % or ${offer}? type it with its sign`,
      offer: { text: offer, spelling: false }
    }
  }
  const share = unit === '%' ? Number((value / 100).toPrecision(15)) : value
  return share > 0 && share <= 1
    ? { ok: true, value: share }
    : { ok: false, message: `a share is over 0 and at most 100 %, got ${value} %` }
}

function readNumber(text: string): TypedAnswer {
  const value = decimal(text)
  return value !== undefined && value > 0 ? { ok: true, value } : { ok: false, message: 'type a number greater than 0' }
}

function readWhole(text: string, optional: boolean): TypedAnswer {
  if (text.trim() === '' && optional) return { ok: true, value: undefined }
  const value = decimal(text)
  if (value !== undefined && Number.isSafeInteger(value) && value >= 1) return { ok: true, value }
  return { ok: false, message: `type a whole number from 1${optional ? ', or nothing to go on to the end' : ''}` }
}

function readText(text: string, { longest, optional }: { longest: number; optional: boolean }): TypedAnswer {
  const value = text.trim()
  if (value === '') return optional ? { ok: true, value: undefined } : { ok: false, message: 'this must not be empty' }
  if (value.length > longest) {
    return { ok: false, message: `at most ${longest} characters, got ${value.length}` }
  }
  return { ok: true, value }
}

/** A decimal number as it is typed; undefined for anything else. */
function decimal(text: string): number | undefined {
  const typed = text.trim()
  if (!/^[+-]?(?:\d+(?:\.\d*)?|\.\d+)(?:e[+-]?\d{1,3})?$/i.test(typed)) return undefined
  const value = Number(typed)
  return Number.isFinite(value) ? value : undefined
}

/** Twelve digits, so that 0.07 is 7 %. */
function percentOf(share: number): number {
  return Number((100 * share).toPrecision(12))
}

function withUnit({ value, unit }: { value: number; unit: string }): string {
  return unit === '1' ? String(value) : `${value} ${unit}`
}
