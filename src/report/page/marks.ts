import { unitInWords } from '../../patient/covariateWords'
import type { Question } from '../../patient/plausibility'
import type { Choice, Place, PlaceValue } from '../../study/edit/place'
import { valueAt } from '../../study/edit/setValue'
import type { StudyFile } from '../../study/file/studySchema'
import { formatPath, type Step } from '../../study/path'
import type { Sign } from '../../study/unitProblem'
import { convert, type Quantity } from '../../units/quantity'
import { type Kind, unitOf, unitsOf } from '../../units/unitTable'
import { percent, typed, withUnit } from './number'
import { type EditQuestion, type Marked, value } from './prose'
import { polished, sentence } from './showing'

/** What a quantity's mark says of it beside its place. */
export interface QuantityMark {
  readonly label: string
  readonly of: Kind | undefined
  readonly sign?: Sign
  /** Shown in place of the quantity as it was typed. */
  readonly shown?: string
}

/** Where the values of one study stand in its file: turns them into marks that can be edited. */
export class Marks {
  readonly #file: StudyFile | undefined
  readonly #questions: readonly Question[]
  readonly #molarMass: number | undefined

  /** Without a file every mark is a value to be read only. */
  constructor(file: StudyFile | undefined, questions: readonly Question[], molarMass: number | undefined) {
    this.#file = file
    this.#questions = questions
    this.#molarMass = molarMass
  }

  get file(): StudyFile | undefined {
    return this.#file
  }

  /** Whether something stands at the path. */
  has(path: readonly Step[]): boolean {
    return this.#file !== undefined && valueAt(this.#file, path) !== undefined
  }

  /** A quantity, shown as it was typed; `read` is what is shown where there is no file. */
  quantity(path: readonly Step[], read: string, mark: QuantityMark): Marked {
    const quantity = this.#at(path)
    if (!isQuantity(quantity)) return value(read)
    const { label, of, sign = 'positive', shown = quantityText(quantity, of) } = mark
    const echo = this.#echo(quantity, of)
    const marked = this.#marked(path, shown, label, {
      kind: 'quantity',
      quantity,
      sign,
      ...(of !== undefined && { of })
    })
    return echo === undefined || marked.edit === undefined
      ? marked
      : { ...marked, edit: { ...marked.edit, echo, ...(of === 'time' && { quietEcho: true }) } }
  }

  share(path: readonly Step[], share: number, label: string): Marked {
    return this.#present(path, percent(share), label, (at) =>
      typeof at === 'number' ? { kind: 'share', share: at } : undefined
    )
  }

  number(path: readonly Step[], read: string, label: string): Marked {
    return this.#present(path, read, label, (at) =>
      typeof at === 'number' ? { kind: 'number', number: at } : undefined
    )
  }

  /** A count; an optional one can be typed where none stands. */
  whole(path: readonly Step[], read: string, label: string, optional: boolean): Marked {
    return this.#present(path, read, label, (at) => {
      if (typeof at === 'number') return { kind: 'whole', whole: at, optional }
      return optional ? { kind: 'whole', optional } : undefined
    })
  }

  /** One of a few words. */
  choice(path: readonly Step[], read: string, label: string, choices: readonly Choice[]): Marked {
    return this.#present(path, read, label, (at) => ({
      kind: 'choice',
      ...(typeof at === 'string' && { choice: at }),
      choices
    }))
  }

  text(path: readonly Step[], read: string, label: string, longest: number, optional = false): Marked {
    return this.#present(path, read, label, (at) => ({
      kind: 'text',
      ...(typeof at === 'string' && { text: at }),
      longest,
      optional
    }))
  }

  #present(path: readonly Step[], read: string, label: string, place: (at: unknown) => PlaceValue | undefined): Marked {
    const found = this.#file === undefined ? undefined : place(this.#at(path))
    return found === undefined ? value(read) : this.#marked(path, read, label, found)
  }

  #marked(path: readonly Step[], text: string, label: string, found: PlaceValue): Marked {
    const at = formatPath(path)
    const asked = this.#questions.find((question) => question.path === at)
    const question = asked && questionOf(asked)
    const place: Place = { path, label, ...found }
    return { kind: 'value', text, edit: { place, at, ...(question !== undefined && { question }) } }
  }

  #at(path: readonly Step[]): unknown {
    return this.#file === undefined ? undefined : valueAt(this.#file, path)
  }

  /** The value in the canonical unit of its kind, where it was typed in another. */
  #echo(quantity: Quantity, of: Kind | undefined): string | undefined {
    const unit = of === undefined ? undefined : unitOf(of, quantity.unit)
    if (of === undefined || unit === undefined) return undefined
    const canonical = unitsOf(of).find(({ moles, reckonedPer }) => moles === 0 && reckonedPer === unit.reckonedPer)
    if (canonical === undefined || canonical.code === quantity.unit) return undefined
    if (unit.moles !== 0 && this.#molarMass === undefined) return undefined
    const converted = convert(of, quantity, canonical.code, this.#molarMass)
    return quantityText({ value: Number(converted.toPrecision(6)), unit: canonical.code }, of)
  }
}

/** A quantity as people write it: `1.6 mg/dL`, `71 years`; ages in words, times in their units. */
export function quantityText({ value: number, unit }: Quantity, of?: Kind): string {
  if (of !== 'age' && of !== 'ageInWeeks') return withUnit(typed(number), unit)
  return `${typed(number)}\u00a0${unitInWords(unit, number)}`
}

function questionOf({ text, offer }: Question): EditQuestion {
  const shown = sentence(polished(text))
  return offer === undefined
    ? { text: shown }
    : { text: shown, offer: { quantity: offer, text: withUnit(typed(offer.value), offer.unit) } }
}

/** Choices from pairs of what stands in the file and what is shown. */
export function choicesOf(pairs: readonly (readonly [value: string, text: string])[]): readonly Choice[] {
  return pairs.map(([value, text]) => ({ value, text }))
}

function isQuantity(found: unknown): found is Quantity {
  return typeof found === 'object' && found !== null && 'value' in found && 'unit' in found
}
