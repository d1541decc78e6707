import type { Target, When } from '../../pk/target'
import type { TargetResult } from '../../pk/targetMet'
import type { Study } from '../../study/study'
import { fromCanonical } from '../../units/quantity'
import { percent, significant, typed, withUnit } from './number'
import { type Prose, value } from './prose'
import type { Showing } from './showing'

/** A target in words, short enough for the head of a row. */
export function targetHead(target: Target, study: Study, showing: Showing): string {
  const { begin, limits, rest } = partsOf(target, study, showing)
  const unbound = isUnbound(target, study) ? ', unbound' : ''
  return `${begin}${signalName(target, study)} ${limits}${unbound}${rest}, ${whenInWords(target.when)}`
}

/**
 * What a regimen gave against a target, in a phrase: `in the window 96.7 % of the time from the first dose on`,
 * `highest trough 14.7 mg/L`; and what was asked.
 */
export function outcomePhrase(result: TargetResult, study: Study, showing: Showing): { said: Prose; asked: string } {
  const { target } = result
  const worst = value(targetValue(result, study, showing))
  const when = ON_ALL.includes(target.when.kind) ? '' : ` ${whenInWords(target.when)}`
  const unbound = isUnbound(target, study) ? 'unbound ' : ''
  const of = signalName(target, study)
  if (isShare(target)) {
    const where =
      target.kind === 'window'
        ? 'in the window'
        : target.kind === 'time-above'
          ? `above ${limitText(target, target.low, study, showing)}`
          : `below ${limitText(target, target.high, study, showing)}`
    return {
      said: [`${unbound}${where}${of === '' ? '' : `${of},`} `, worst, ` of the time${when}`],
      asked: `at least ${percent(target.share)}`
    }
  }
  const { begin } = partsOf(target, study, showing)
  const name = begin.startsWith('AUC') ? begin : begin.toLowerCase()
  const which =
    when !== '' ? '' : target.low === undefined ? 'highest ' : target.high === undefined ? 'lowest ' : 'worst '
  return { said: [`${which}${unbound}${name}${of} `, worst, when], asked: limitsInWords(target, study, showing) }
}

/** Stretches of which the worst is reported. */
const ON_ALL: readonly When['kind'][] = ['every-interval', 'every-day']

/** The worst value that a regimen gives, with digits enough that it falls on the side of the limit that it is on. */
export function targetValue(result: TargetResult, study: Study, showing: Showing): string {
  const { target, value: worst } = result
  const number = targetNumber(result, study, showing)
  if (worst === undefined || isShare(target)) return number
  return withUnit(number, inUnit(target, worst, study, showing).unit)
}

/** The same without its unit, for where the limits beside it carry that. */
export function targetNumber(result: TargetResult, study: Study, showing: Showing): string {
  const { target, value: worst } = result
  if (worst === undefined) return '–'
  if (isShare(target)) return percent(worst)
  const shown = inUnit(target, worst, study, showing)
  for (let digits = 3; digits < 15; digits++) {
    const rounded = Number(shown.number.toPrecision(digits))
    const low = target.low === undefined ? undefined : inUnit(target, target.low, study, showing).number
    const high = target.high === undefined ? undefined : inUnit(target, target.high, study, showing).number
    const sameSide = (limit: number | undefined) =>
      limit === undefined || Math.sign(rounded - limit) === Math.sign(shown.number - limit)
    if (sameSide(low) && sameSide(high)) return significant(shown.number, digits)
  }
  return typed(shown.number)
}

/** Whether the target asks for a share of time. */
export function isShare(target: Target): boolean {
  return target.kind === 'window' || target.kind === 'time-above' || target.kind === 'time-below'
}

export function whenInWords(when: When): string {
  switch (when.kind) {
    case 'steady-state':
      return 'at steady state'
    case 'throughout':
      return 'from the first dose to the end'
    case 'from-now':
      return 'from now to the end'
    case 'every-interval':
      return 'in every interval'
    case 'every-day':
      return 'on every day'
    case 'day':
      return `on day\u00a0${when.day}`
    case 'last-interval':
      return 'in the last complete interval'
  }
}

/** Limits of a window on the total observed concentration [mg/L]. */
export function totalLimits(target: Target): { low: number; high: number } {
  return { low: (target.low ?? 0) / target.factor, high: (target.high ?? 0) / target.factor }
}

export function partsOf(
  target: Target,
  study: Study,
  showing: Showing
): { begin: string; limits: string; rest: string } {
  const between = limitsInWords(target, study, showing)
  const share = target.share === 1 ? ' all the time' : ` for at least ${percent(target.share)} of the time`
  switch (target.kind) {
    case 'window':
      return { begin: 'Level', limits: between, rest: share }
    case 'time-above':
      return { begin: 'Level', limits: `above ${limitText(target, target.low, study, showing)}`, rest: share }
    case 'time-below':
      return { begin: 'Level', limits: `below ${limitText(target, target.high, study, showing)}`, rest: share }
    case 'level': {
      const after = `${showing.typedTime(target.after ?? 0)} after the ${target.from === 'dose end' ? 'end' : 'start'} of a dose`
      return { begin: 'Level', limits: between, rest: ` ${after}` }
    }
    case 'auc24':
      return { begin: ratio('AUC24', target), limits: between, rest: '' }
    case 'auc-interval':
      return { begin: ratio('AUC of an interval', target), limits: between, rest: '' }
    case 'trough':
      return { begin: 'Trough', limits: between, rest: '' }
    case 'peak':
      return { begin: 'Peak', limits: between, rest: '' }
    case 'minimum':
      return { begin: 'Minimum', limits: between, rest: '' }
    case 'average':
      return { begin: 'Average', limits: between, rest: '' }
  }
}

function ratio(name: string, target: Target): string {
  return target.unit === 'h' ? `${name} / MIC` : name
}

function limitsInWords(target: Target, study: Study, showing: Showing): string {
  const { low, high } = target
  if (low !== undefined && high !== undefined) {
    const from = inUnit(target, low, study, showing)
    return `${typed(from.number)} to ${limitText(target, high, study, showing)}`
  }
  return low === undefined
    ? `at most ${limitText(target, high, study, showing)}`
    : `at least ${limitText(target, low, study, showing)}`
}

export function limitText(target: Target, value: number | undefined, study: Study, showing: Showing): string {
  if (value === undefined) throw new RangeError(`a target of the kind ${target.kind} lacks a limit`)
  const { number, unit } = inUnit(target, value, study, showing)
  return withUnit(typed(number), unit)
}

/** A value in the target's own terms in the units of the screen; what it is a multiple of stands for a unit. */
function inUnit(target: Target, value: number, study: Study, showing: Showing): { number: number; unit: string } {
  const { molarMass } = study.drugModel.drug
  switch (target.unit) {
    case 'mg/L': {
      const unit = showing.concentrationUnit
      return { number: fromCanonical('concentration', value, unit, molarMass).value, unit }
    }
    case 'mg.h/L': {
      const unit = showing.areaUnit
      return { number: fromCanonical('area', value, unit, molarMass).value, unit }
    }
    case '1':
      return { number: value, unit: isShare(target) || target.kind !== 'auc24' ? '× MIC' : '' }
    default:
      return { number: value, unit: target.unit }
  }
}

/** The free fraction is in the factor, alone or over the MIC. */
export function isUnbound(target: Target, study: Study): boolean {
  const fraction = study.drugModel.drug.fractionUnbound
  if (fraction === undefined || fraction === 1) return false
  const alone = target.unit === 'mg/L' || target.unit === 'mg.h/L' ? target.factor : target.factor * (study.mic ?? 1)
  return Math.abs(alone - fraction) < 1e-9
}

/** ` at effect-site` where the target is not of the observed concentration. */
export function signalName(target: Target, study: Study): string {
  const { signal } = target
  if (signal.kind === 'observed') return ''
  const { drugModel } = study
  const name =
    signal.kind === 'observation'
      ? drugModel.observations[signal.index]?.id
      : drugModel.transfers.filter((transfer) => transfer.kind === 'effect')[signal.index]?.to
  return ` of ${name ?? 'another site'}`
}
