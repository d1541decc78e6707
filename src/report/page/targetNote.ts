import type { Target } from '../../pk/target'
import type { Step } from '../../study/path'
import type { Study } from '../../study/study'
import { multipleOf } from '../../units/spacing'
import type { Kind } from '../../units/unitTable'
import type { Marks } from './marks'
import { brief, withUnit } from './number'
import { type Marked, type Prose, value } from './prose'
import type { Showing } from './showing'
import { isShare, isUnbound, limitText, partsOf, signalName, whenInWords } from './targetWords'

/** A target in words: its limits as they were typed, over which stretches, and what it is for. */
export function targetSentence(target: Target, index: number, study: Study, showing: Showing, marks: Marks): Prose {
  const at = ['targets', index]
  const unbound = isUnbound(target, study) ? ', unbound' : ''
  const role = target.role === undefined ? '' : ` (${target.role})`
  return [
    `${partsOf(target, study, showing).begin}${signalName(target, study)} `,
    ...limits(target, at, study, showing, marks),
    unbound,
    ...rest(target, at, showing, marks),
    `, ${whenInWords(target.when)}${role}.`
  ].filter((part) => part !== '')
}

function limits(
  target: Target,
  at: readonly Step[],
  study: Study,
  showing: Showing,
  marks: Marks
): (string | Marked)[] {
  const limit = (key: 'low' | 'high', label: string): Marked => {
    const read = limitText(target, target[key], study, showing)
    const sign = key === 'low' ? 'not negative' : 'positive'
    if (marks.has([...at, 'timesMic'])) return marks.number([...at, 'timesMic'], read, 'multiple of the MIC')
    // What a ratio to the MIC is a multiple of stands behind it.
    const shown = target.unit === '1' ? { shown: read } : {}
    return marks.quantity([...at, key], read, { label, of: LIMIT_KINDS[target.unit] ?? 'hours', sign, ...shown })
  }
  const { low, high } = target
  switch (target.kind) {
    case 'time-above':
      return ['above ', limit('low', 'limit')]
    case 'time-below':
      return ['below ', limit('high', 'limit')]
    default:
      if (low !== undefined && high !== undefined) {
        return [limit('low', 'low limit'), ' to ', limit('high', 'high limit')]
      }
      return low === undefined ? ['at most ', limit('high', 'high limit')] : ['at least ', limit('low', 'low limit')]
  }
}

const LIMIT_KINDS: Readonly<Record<string, Kind>> = {
  'mg/L': 'concentration',
  'mg.h/L': 'area',
  h: 'hours',
  '1': 'number'
}

function rest(target: Target, at: readonly Step[], showing: Showing, marks: Marks): (string | Marked)[] {
  if (target.kind === 'level') {
    const after = { label: 'time after the dose', of: 'time', sign: 'not negative' } as const
    const from = marks.choice([...at, 'from'], target.from === 'dose end' ? 'end' : 'start', 'counted from', [
      { value: 'dose start', text: 'start' },
      { value: 'dose end', text: 'end' }
    ])
    const time = marks.quantity([...at, 'after'], showing.typedTime(target.after ?? 0), after)
    return [' ', time, ' after the ', from, ' of a dose']
  }
  if (!isShare(target)) return []
  if (target.share === 1 && !marks.has([...at, 'share'])) return [' all the time']
  return [' for at least ', marks.share([...at, 'share'], target.share, 'share of the time'), ' of the time']
}

/** How far and how finely the study is computed, and what else holds for all of it. */
export function courseSentence(study: Study, showing: Showing, marks: Marks): Prose {
  const time = (path: readonly Step[], hours: number, label: string, sign: 'positive' | 'not negative') =>
    marks.quantity(path, showing.typedTime(hours), { label, of: 'time', sign })
  const { sampling, now, mic } = study
  const prose: (string | Marked)[] = [
    'Computed until ',
    time(['sampling', 'until'], sampling.until, 'end of the study', 'positive'),
    ', with a row of the table every ',
    time(['sampling', 'every'], multipleOf(sampling.every, 1), 'step of the table', 'positive')
  ]
  sampling.also.forEach((hours, k) => {
    prose.push(
      k === 0 ? ' and at ' : ', ',
      time(['sampling', 'also', k], hours, 'further time of the table', 'not negative')
    )
  })
  if (now !== undefined) prose.push('; now is at ', time(['now'], now, 'now', 'not negative'))
  if (mic !== undefined) {
    const mark = { label: 'MIC', of: 'concentration' } as const
    prose.push('; the MIC is ', marks.quantity(['mic'], withUnit(brief(mic), 'mg/L'), mark))
  }
  if (study.clock !== undefined) prose.push('; time 0 is at ', value(study.clock))
  return [...prose, '.']
}
