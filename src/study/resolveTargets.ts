import type { DrugModel } from '../patient/drugModel'
import type { Target, TargetKind, When } from '../pk/target'
import type { Signal } from '../pk/trajectory'
import type { Kind } from '../units/unitTable'
import { type Converter, present } from './converter'
import type { TargetFile } from './file/targetSchema'
import { knownNames } from './nearestName'
import { below } from './path'
import type { Problems } from './problems'

/** What targets refer to; the model is absent where it could not be read. */
export interface TargetContext {
  readonly convert: Converter
  readonly drugModel: DrugModel | undefined
  /** [mg/L] */
  readonly mic: number | undefined
  readonly hasNow: boolean
}

/** Which limits each kind of target takes. */
const LIMITS: Readonly<Record<TargetKind, 'either' | 'both' | 'low' | 'high'>> = {
  window: 'both',
  trough: 'either',
  peak: 'either',
  minimum: 'either',
  average: 'either',
  level: 'either',
  auc24: 'either',
  'auc-interval': 'either',
  'time-above': 'low',
  'time-below': 'high'
}

/** One target in canonical units; what is wrong with it goes to the problems. */
export function resolveTarget(target: TargetFile, path: string, context: TargetContext): Target {
  const { convert } = context
  checkLimits(target, path, convert)
  checkSharing(target, path, context)
  const { kind: limitKind, unit } = limitUnit(target)
  const limit = (key: 'low' | 'high') => target[key] && convert.number(limitKind, target[key], below(path, key))
  const low = target.kind === 'time-above' ? (target.timesMic ?? limit('low')) : limit('low')
  const high = target.kind === 'time-below' ? (target.timesMic ?? limit('high')) : limit('high')
  if (low !== undefined && high !== undefined && low >= high) {
    convert.problems.add(below(path, 'high'), 'the high limit must be above the low one')
  }
  const free = target.unbound === true ? (context.drugModel?.drug.fractionUnbound ?? 1) : 1
  const mic = target.perMic === true || target.timesMic !== undefined ? (context.mic ?? 1) : 1
  return {
    kind: target.kind,
    when: resolveWhen(target.when ?? 'steady-state'),
    ...present('role', target.role),
    signal: resolveSignal(target, path, context),
    ...present('low', low),
    ...present('high', high),
    factor: free / mic,
    ...(target.unbound === true && { unbound: true as const }),
    unit,
    share: target.share ?? 1,
    ...present('after', target.after && convert.number('time', target.after, below(path, 'after'))),
    ...present('from', target.from)
  }
}

function limitUnit(target: TargetFile): { kind: Kind; unit: string } {
  const isArea = target.kind === 'auc24' || target.kind === 'auc-interval'
  if (target.perMic === true) return isArea ? { kind: 'hours', unit: 'h' } : { kind: 'number', unit: '1' }
  if (target.timesMic !== undefined) return { kind: 'number', unit: '1' }
  return isArea ? { kind: 'area', unit: 'mg.h/L' } : { kind: 'concentration', unit: 'mg/L' }
}

function checkLimits(target: TargetFile, path: string, { problems }: Converter): void {
  const { kind, low, high, timesMic } = target
  const has = (value: unknown) => value !== undefined
  switch (LIMITS[kind]) {
    case 'both':
      if (!has(low) || !has(high)) problems.add(path, `a target "${kind}" needs "low" and "high"`)
      break
    case 'either':
      if (!has(low) && !has(high)) problems.add(path, `a target "${kind}" needs "low" or "high"`)
      break
    case 'low':
      if (has(low) === has(timesMic)) problems.add(path, `a target "${kind}" needs either "low" or "timesMic"`)
      if (has(high))
        problems.add(below(path, 'high'), `a target "${kind}" has no high limit; use "window" or "time-below"`)
      break
    case 'high':
      if (has(high) === has(timesMic)) problems.add(path, `a target "${kind}" needs either "high" or "timesMic"`)
      if (has(low))
        problems.add(below(path, 'low'), `a target "${kind}" has no low limit; use "window" or "time-above"`)
      break
  }
  checkKeysOfKind(target, path, problems)
}

/** Keys that only some kinds of target take. */
function checkKeysOfKind(target: TargetFile, path: string, problems: Problems): void {
  const { kind, timesMic } = target
  const has = (value: unknown) => value !== undefined
  const isTime = kind === 'time-above' || kind === 'time-below'
  if (has(timesMic) && !isTime) {
    problems.add(
      below(path, 'timesMic'),
      '"timesMic" is for time-above and time-below; elsewhere use "perMic": true with limits'
    )
  }
  if (has(timesMic) && target.perMic === true)
    problems.add(below(path, 'perMic'), 'give "timesMic" or "perMic", not both')
  if (isTime && target.share === undefined)
    problems.add(below(path, 'share'), `a target "${kind}" needs "share", the share of time`)
  if (kind === 'level' && target.after === undefined)
    problems.add(below(path, 'after'), 'a target "level" needs "after": how long after the dose')
  if (kind === 'level' && target.from === undefined) {
    problems.add(below(path, 'from'), 'a target "level" needs "from": "dose start" or "dose end"')
  }
  for (const key of ['after', 'from'] as const) {
    if (kind !== 'level' && target[key] !== undefined)
      problems.add(below(path, key), `"${key}" is for a target "level"`)
  }
}

function checkSharing(target: TargetFile, path: string, context: TargetContext): void {
  const { problems } = context.convert
  const usesMic = target.perMic === true ? 'perMic' : target.timesMic !== undefined ? 'timesMic' : undefined
  if (usesMic !== undefined && context.mic === undefined) {
    problems.add(
      below(path, usesMic),
      `"${usesMic}" needs the study's "mic", for example "mic": { "value": 1, "unit": "mg/L" }`
    )
  }
  if (target.when === 'from-now' && !context.hasNow)
    problems.add(below(path, 'when'), '"from-now" needs the study\'s "now"')
  if (target.unbound !== true) return
  if (context.drugModel !== undefined && context.drugModel.drug.fractionUnbound === undefined) {
    problems.add(
      below(path, 'unbound'),
      "an unbound target needs the drug's free fraction; the model states no drug.fractionUnbound"
    )
  }
}

function resolveWhen(when: string): When {
  switch (when) {
    case 'steady-state':
    case 'throughout':
    case 'from-now':
    case 'every-interval':
    case 'every-day':
    case 'last-interval':
      return { kind: when }
    default:
      return { kind: 'day', day: Number(when.slice('day-'.length)) }
  }
}

/** Effect sites count in the order of the model's compartments, observations in their own. */
function resolveSignal(target: TargetFile, path: string, { drugModel, convert }: TargetContext): Signal {
  if (target.of === undefined || drugModel === undefined) return { kind: 'observed' }
  const sites = effectSiteIds(drugModel)
  const observations = drugModel.observations.map(({ id }) => id)
  if (observations.includes(target.of)) return { kind: 'observation', index: observations.indexOf(target.of) }
  if (sites.includes(target.of)) return { kind: 'effect-site', index: sites.indexOf(target.of) }
  convert.problems.add(
    below(path, 'of'),
    `"${target.of}" is no observation or effect site of the model; ${knownNames(target.of, [...sites, ...observations])}; the observed compartment needs no "of"`
  )
  return { kind: 'observed' }
}

/** In the order of the transfers, which `resolveModel` has put in that of the compartments. */
function effectSiteIds(drugModel: DrugModel): string[] {
  return drugModel.transfers.flatMap((transfer) => (transfer.kind === 'effect' ? [transfer.to] : []))
}
