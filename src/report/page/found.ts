import type { DistributionOver } from '../../pk/distribution'
import type { TargetResult } from '../../pk/targetMet'
import type { RegimenResult, StudyResult } from '../../study/result'
import { shownUnit, significant } from './number'
import type { RegimenLabel } from './page'
import { type Marked, type Prose, strong, value } from './prose'
import { listed, type Showing, sentence } from './showing'
import { outcomePhrase, targetHead } from './targetWords'

/** What was found, in sentences: who meets the targets, what the others miss, when a level can be read, when steady state is near. */
export function foundSentences(
  result: StudyResult,
  labels: readonly RegimenLabel[],
  showing: Showing
): readonly Prose[] {
  return [
    ...aboutTargets(result, labels, showing),
    ...aboutDistribution(result, showing),
    ...aboutSteadyState(result, labels, showing)
  ]
}

function aboutTargets(result: StudyResult, labels: readonly RegimenLabel[], showing: Showing): Prose[] {
  if (result.study.targets.length === 0) return [['No target is stated, so no regimen can meet or miss one.']]
  const verdicts = result.regimens.map(
    ({ exposure }, k): Verdict => ({
      label: labels[k]!,
      missed: exposure.targets.filter((target) => target.met === false),
      open: exposure.targets.filter((target) => target.met === undefined),
      met: exposure.targets.filter((target) => target.met === true)
    })
  )
  const winners = verdicts.filter(({ missed, open }) => missed.length === 0 && open.length === 0)
  const lead: (string | Marked)[] =
    winners.length === 0
      ? [strong('No regimen meets every target.')]
      : [strong(`${listed(winners.map(named))} ${winners.length === 1 ? 'meets' : 'meet'} every target`)]
  const [only] = winners
  if (winners.length === 1 && only !== undefined) {
    only.met.forEach((target, k) => {
      lead.push(k === 0 ? ': ' : ', ', ...outcomePhrase(target, result.study, showing).said)
    })
  }
  if (winners.length > 0) lead.push('.')
  const others = verdicts.filter((verdict) => !winners.includes(verdict))
  return [lead, ...others.map((verdict) => aboutMisses(verdict, result, showing))]
}

interface Verdict {
  readonly label: RegimenLabel
  readonly missed: readonly TargetResult[]
  /** Those that cannot be judged. */
  readonly open: readonly TargetResult[]
  readonly met: readonly TargetResult[]
}

function aboutMisses(verdict: Verdict, result: StudyResult, showing: Showing): Prose {
  const { study } = result
  const prose: (string | Marked)[] = [strong(named(verdict))]
  if (verdict.missed.length > 0) prose.push(` misses ${verdict.missed.length} of ${study.targets.length}: `)
  verdict.missed.forEach((target, k) => {
    const { said, asked } = outcomePhrase(target, study, showing)
    prose.push(k === 0 ? '' : ', ', ...said, ` (asked: ${asked})`)
  })
  verdict.open.forEach((target, k) => {
    prose.push(k > 0 || verdict.missed.length > 0 ? '; ' : ': ')
    prose.push(
      `${lowered(targetHead(target.target, study, showing))} cannot be judged (${target.why ?? 'not defined'})`
    )
  })
  prose.push('.')
  return prose
}

/** `C (500 mg every 24 h)`. */
function named({ label }: { label: RegimenLabel }): string {
  return `${label.letter} (${label.name})`
}

function lowered(text: string): string {
  return text.startsWith('AUC') ? text : text.charAt(0).toLowerCase() + text.slice(1)
}

function aboutDistribution(result: StudyResult, showing: Showing): Prose[] {
  const all = result.regimens.flatMap((regimen) => regimen.distribution)
  const hours = all.flatMap(({ over }) => (over === undefined ? [] : [over]))
  const without = all.filter(({ over }) => over === undefined)
  const sentences: Prose[] = []
  if (hours.length > 0) {
    const longest = Math.max(...hours)
    sentences.push([
      'A level drawn sooner than ',
      value(showing.timeText(longest)),
      ' after the end of a dose may still show distribution, and is not compared with a window.'
    ])
  }
  for (const reason of reasons(without, all.length)) sentences.push([sentence(reason)])
  return sentences
}

/** A model that describes no distribution says so once; else how many intervals end before distribution is over. */
function reasons(without: readonly DistributionOver[], all: number): string[] {
  const counts = new Map<string, number>()
  for (const { why } of without) if (why !== undefined) counts.set(why, (counts.get(why) ?? 0) + 1)
  return [...counts].map(([why, count]) => {
    if (!why.startsWith('never')) return why
    const which = count === all ? 'every interval' : count === 1 ? 'one interval' : `${count} of ${all} intervals`
    return `in ${which} distribution is never over before the next dose or the end`
  })
}

function aboutSteadyState(result: StudyResult, labels: readonly RegimenLabel[], showing: Showing): Prose[] {
  const reached = result.regimens.flatMap(({ exposure }: RegimenResult, k) => {
    const hours = exposure.steadyState.reached90
    return hours === undefined ? [] : [`${labels[k]!.letter}\u00a0${significant(showing.time(hours))}`]
  })
  if (reached.length === 0) return []
  return [
    [
      '90\u00a0% of steady state is reached after ',
      ...listedValues(reached),
      `\u00a0${shownUnit(showing.timeUnit)}, by accumulation and not by half-lives, if nothing changed any more.`
    ]
  ]
}

function listedValues(items: readonly string[]): (string | Marked)[] {
  return items.flatMap((item, k) => [k === 0 ? '' : k === items.length - 1 ? ' and ' : ', ', value(item)])
}
