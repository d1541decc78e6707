import type { DoseLine, Exception, Reckoned } from '../pk/prescription'
import type { Quantity } from '../units/quantity'
import { type Kind, unitOf } from '../units/unitTable'
import { type Converter, present } from './converter'
import type { DoseFile, ExceptionFile } from './file/doseSchema'
import { knownNames } from './nearestName'
import { below } from './path'

/** What a dose may refer to; a list is absent where the model that should hold it could not be read. */
export interface DoseContext {
  readonly convert: Converter
  readonly routes: readonly { readonly name: string; readonly input: 'infusion' | 'bolus' }[] | undefined
  readonly products: readonly { readonly name: string; readonly fraction: number }[] | undefined
}

/** One line of a regimen in canonical units; what is wrong with it goes to the problems. */
export function resolveDose(dose: DoseFile, path: string, context: DoseContext): DoseLine {
  const { convert } = context
  const at = (key: string) => below(path, key)
  checkNames(dose, path, context)
  checkRules(dose, path, context)
  const product = context.products?.find((candidate) => candidate.name === dose.product)
  return {
    route: dose.route,
    ...present('amount', dose.amount && reckoned('dose', dose.amount, at('amount'), context)),
    ...present('rate', dose.rate && reckoned('doseRate', dose.rate, at('rate'), context)),
    ...present('over', dose.over && convert.number('time', dose.over, at('over'))),
    moietyFraction: product?.fraction ?? 1,
    ...present('product', dose.product),
    ...present('by', dose.by),
    ...present('atMost', dose.atMost && reckoned('amount', dose.atMost, at('atMost'), context).value),
    at: convert.number('time', dose.at, at('at')),
    ...present('every', dose.every && convert.spacing(dose.every, at('every'))),
    ...present('count', dose.count),
    exceptions: resolveExceptions(dose, at('exceptions'), context)
  }
}

/** Check the names in a dose that may be malformed elsewhere: a wrong unit must not hide a wrong route. */
export function checkNames(raw: unknown, path: string, context: DoseContext): void {
  if (typeof raw !== 'object' || raw === null) return
  const { route, product } = raw as { route?: unknown; product?: unknown }
  const { problems } = context.convert
  const { routes, products } = context
  if (typeof route === 'string' && routes !== undefined && !routes.some((known) => known.name === route)) {
    const known = routes.map(({ name }) => name)
    problems.add(below(path, 'route'), `the model has no route "${route}"; ${knownNames(route, known)}`)
  }
  if (products === undefined) return
  const known = products.map(({ name }) => name)
  if (typeof product === 'string' && !known.includes(product)) {
    problems.add(below(path, 'product'), `the model's drug has no product "${product}"; ${knownNames(product, known)}`)
  } else if (product === undefined && known.length > 0) {
    const listed = known.map((name) => `"${name}"`).join(' or ')
    problems.add(below(path, 'product'), `say which product of the drug is dosed: ${listed}`)
  }
}

function reckoned(kind: Kind, quantity: Quantity, path: string, { convert, products }: DoseContext): Reckoned {
  const unit = unitOf(kind, quantity.unit)
  if (unit !== undefined && unit.moles !== 0 && products !== undefined && products.length > 0) {
    convert.problems.add(
      path,
      `a dose of a product is a mass, got "${quantity.unit}": only the moiety's molar mass is known`
    )
  }
  return { value: convert.number(kind, quantity, path), per: unit?.reckonedPer ?? 'dose' }
}

function checkRules(dose: DoseFile, path: string, { convert, routes }: DoseContext): void {
  const { problems } = convert
  const at = (key: string) => below(path, key)
  if ((dose.amount === undefined) === (dose.rate === undefined)) {
    problems.add(path, `a dose needs either "amount" or "rate"${dose.amount === undefined ? '' : ', not both'}`)
  }
  const isBolus = dose.bolus === true
  if (dose.rate !== undefined && dose.over === undefined)
    problems.add(at('over'), '"rate" needs "over": for how long it runs')
  if (isBolus && dose.over !== undefined)
    problems.add(at('bolus'), 'a bolus has no length; leave out "over" or "bolus"')
  const input = routes?.find((route) => route.name === dose.route)?.input
  if (input === 'infusion' && dose.amount !== undefined && dose.over === undefined && !isBolus) {
    problems.add(at('over'), `doses on the route "${dose.route}" are infusions: give "over", or say "bolus": true`)
  }
  const perKg = [dose.amount, dose.rate, ...(dose.exceptions ?? []).map((exception) => exception.amount)].some(
    (quantity) => quantity !== undefined && /\/kg(?:\/|$)/.test(quantity.unit)
  )
  if (dose.by !== undefined && !perKg)
    problems.add(at('by'), '"by" names the weight of a dose per kg; this dose is none')
  if (dose.count !== undefined && dose.every === undefined) {
    problems.add(at('count'), '"count" needs "every": how far apart the doses are')
  }
}

function resolveExceptions(dose: DoseFile, path: string, context: DoseContext): Exception[] {
  const { convert } = context
  const { problems } = convert
  const last = dose.every === undefined ? 1 : (dose.count ?? Number.POSITIVE_INFINITY)
  const seen = new Set<number>()
  return (dose.exceptions ?? []).map((exception, i) => {
    const at = below(path, i)
    const { number } = exception
    if (number > last) {
      problems.add(
        below(at, 'number'),
        `there is no dose ${number}: the line has ${last === 1 ? 'one dose' : `${last} doses`}`
      )
    }
    if (seen.has(number)) problems.add(below(at, 'number'), `dose ${number} has an exception already; put both in one`)
    seen.add(number)
    checkException(exception, dose, at, convert)
    return {
      number,
      ...present('missed', exception.missed),
      ...present('lateBy', exception.lateBy && convert.number('time', exception.lateBy, below(at, 'lateBy'))),
      ...present('shiftsLater', exception.shiftsLater),
      ...present('amount', exception.amount && reckoned('dose', exception.amount, below(at, 'amount'), context)),
      ...present('over', exception.over && convert.number('time', exception.over, below(at, 'over'))),
      ...present(
        'stoppedAfter',
        exception.stoppedAfter && convert.number('time', exception.stoppedAfter, below(at, 'stoppedAfter'))
      ),
      ...present('fractionTaken', exception.fractionTaken)
    }
  })
}

function checkException(exception: ExceptionFile, dose: DoseFile, at: string, convert: Converter): void {
  const { problems } = convert
  const { number: _, missed, ...departures } = exception
  const others = Object.keys(departures)
  if (missed === true && others.length > 0) {
    problems.add(below(at, others[0] ?? 'missed'), 'a missed dose has no other departure from the schedule')
  }
  if (missed !== true && others.length === 0)
    problems.add(at, 'say what happened to this dose, for example "missed": true')
  if (exception.shiftsLater !== undefined && exception.lateBy === undefined) {
    problems.add(below(at, 'shiftsLater'), '"shiftsLater" needs "lateBy"')
  }
  if (exception.lateBy !== undefined && dose.every === undefined) {
    const moved = convert.number('time', dose.at, at) + convert.number('time', exception.lateBy, below(at, 'lateBy'))
    if (moved < 0) problems.add(below(at, 'lateBy'), `the dose would be given at ${moved} h; no time is before 0 h`)
  }
  const length = exception.over ?? dose.over
  if (exception.stoppedAfter === undefined) return
  if (length === undefined) {
    problems.add(below(at, 'stoppedAfter'), 'only an infusion can be stopped; this dose is given at once')
  } else if (convert.number('time', exception.stoppedAfter, at) > convert.number('time', length, at)) {
    problems.add(
      below(at, 'stoppedAfter'),
      `stopped after ${exception.stoppedAfter.value} ${exception.stoppedAfter.unit}, but the infusion lasts ${length.value} ${length.unit}`
    )
  }
}
