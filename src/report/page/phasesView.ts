import type { PhasesOfStretch } from '../../pk/phases'
import type { StudyResult } from '../../study/result'
import { type Entry, entry, entryOf, grid, regimenColumns } from './grid'
import { percent, significant, typed, withUnit } from './number'
import type { GridView, PhaseCurves, PhasesBlock, PhasesView, RegimenLabel } from './page'
import { type Prose, value } from './prose'
import { polished, type Showing, sentence } from './showing'

/** Points of a phase curve. */
const POINTS = 160

/** The phases of every stretch, and when a level can be read and steady state is near. */
export function phasesView(result: StudyResult, labels: readonly RegimenLabel[], showing: Showing): PhasesView {
  return {
    blocks: result.phases.map((stretch) => block(stretch, result, showing)),
    ...(result.phases.length === 0
      ? { why: 'Phases are those of a linear model; elimination or binding of this one saturates.' }
      : {}),
    sampling: samplingGrid(result, labels, showing)
  }
}

function block(stretch: PhasesOfStretch, result: StudyResult, showing: Showing): PhasesBlock {
  const title = `From ${showing.typedTime(stretch.from)} to ${showing.typedTime(stretch.to)}`
  return {
    title,
    table: phasesGrid(stretch, title, showing),
    sentences: sentences(stretch, result.study.drugModel.apparent ? '/F' : '', showing),
    ...(stretch.phases.length === 0 ? {} : { figure: curves(stretch, result, showing) })
  }
}

function phaseName(stretch: PhasesOfStretch, k: number): string {
  return `phase ${k + 1}${k === stretch.rulingPhase ? ', ruling' : ''}`
}

function phasesGrid(stretch: PhasesOfStretch, title: string, showing: Showing): GridView {
  const shares = stretch.accumulation.map(({ period, shares }) => ({
    title: `share of accumulation, every ${typed(showing.time(period))}\u00a0${showing.timeUnit}`,
    shares
  }))
  const extra = [...stretch.absorption, ...stretch.effectSites].map((rate) => ({
    head: `${rate.name}${rate.setsFinalSlope ? ', sets the final slope' : ''}`,
    entries: [
      { shown: significant(showing.time(rate.halfLife)) },
      ...Array.from(
        { length: 1 + shares.length },
        (): Entry => ({ shown: undefined, why: 'not a phase of the disposition' })
      )
    ]
  }))
  return grid({
    title,
    explanation: 'after a bolus into the observed compartment, sessions off',
    columns: [
      { title: `half-life, ${showing.timeUnit}` },
      { title: 'share of AUC' },
      ...shares.map(({ title }) => ({ title }))
    ],
    folded: false,
    rows: [
      ...stretch.phases.map((phase, k) => ({
        head: phaseName(stretch, k),
        entries: [
          { shown: significant(showing.time(phase.halfLife)) },
          { shown: percent(phase.shareOfAuc) },
          ...shares.map(({ shares }) => entry(shares[k], percent, undefined))
        ]
      })),
      ...extra
    ]
  })
}

/** `over` is `/F` where clearances and volumes contain the bioavailability. */
function sentences(stretch: PhasesOfStretch, over: string, showing: Showing): Prose[] {
  const prose: Prose[] = []
  const said = (name: string, number: number | undefined, unit: string) =>
    number === undefined ? [] : [`${name} `, value(withUnit(significant(number), unit)), ', ']
  const moments = [
    ...said(`clearance${over}`, stretch.clearance, 'L/h'),
    ...said(`Vss${over}`, stretch.vss, 'L'),
    ...said(`Vz${over}`, stretch.vz, 'L'),
    ...said('mean residence time', stretch.mrt === undefined ? undefined : showing.time(stretch.mrt), showing.timeUnit),
    ...said(
      'terminal half-life',
      stretch.terminalHalfLife === undefined ? undefined : showing.time(stretch.terminalHalfLife),
      showing.timeUnit
    )
  ]
  if (moments.length > 0) prose.push(['Moments: ', ...moments.slice(0, -1), '.'])
  if (stretch.rulingPhase !== undefined) {
    prose.push(['The ruling phase is the slowest that carries at least 10\u00a0% of the AUC after a bolus.'])
  }
  if (stretch.stiffness !== undefined && stretch.longestExplicitStep !== undefined) {
    const steps =
      stretch.explicitSteps === undefined ? [] : [', ', value(typed(stretch.explicitSteps)), ' of them over this study']
    prose.push([
      'Stiffness ',
      value(significant(stretch.stiffness)),
      ': a step-by-step method would need steps under ',
      value(showing.timeText(stretch.longestExplicitStep)),
      ...steps,
      '; the numbers here need none.'
    ])
  }
  for (const note of stretch.notes) prose.push([sentence(polished(note))])
  for (const reason of new Set(Object.values(stretch.why))) prose.push([sentence(polished(reason))])
  return prose
}

/** The fall after a bolus and its parts, as shares of the level just after it, over as long as distribution is seen. */
function curves(stretch: PhasesOfStretch, result: StudyResult, showing: Showing): PhaseCurves {
  const { phases } = stretch
  const whole = phases.reduce((sum, phase) => sum + phase.coefficient, 0)
  const hours = horizon(stretch, result)
  // Closer together at first, where the fast phases fall.
  const times = Array.from({ length: POINTS + 1 }, (_, k) => hours * (k / POINTS) ** 2)
  const parts = phases.map((phase, k) => ({
    label: `${phaseName(stretch, k)}, ${showing.timeText(phase.halfLife)}`,
    values: times.map((time) => (phase.coefficient / whole) * Math.exp(-phase.eigenvalue * time)),
    ruling: k === stretch.rulingPhase
  }))
  const said = phases.map((phase, k) => `${phaseName(stretch, k)} halves in ${showing.timeText(phase.halfLife)}`)
  return {
    times: times.map(showing.time),
    timeUnit: showing.timeUnit,
    hoursPerUnit: 1 / showing.time(1),
    total: times.map((_, at) => parts.reduce((sum, part) => sum + part.values[at]!, 0)),
    parts,
    label: `Fall of the concentration after a bolus, as a share of its start, over ${showing.timeText(hours)}: ${said.join('; ')}.`
  }
}

/** Six times as long as distribution takes, and at least a half-life of the ruling phase. */
function horizon(stretch: PhasesOfStretch, result: StudyResult): number {
  const over = result.regimens.flatMap(({ distribution }) => distribution.map((each) => each.byPhases ?? 0))
  const ruling = stretch.phases[stretch.rulingPhase ?? stretch.phases.length - 1]?.halfLife ?? 1
  return roundHours(Math.max(6 * Math.max(0, ...over), ruling))
}

function roundHours(hours: number): number {
  const steps = [0.25, 0.5, 1, 2, 3, 4, 6, 8, 12, 18, 24, 36, 48, 72, 96, 168, 336]
  return steps.find((step) => step >= hours) ?? Math.ceil(hours / 168) * 168
}

function samplingGrid(result: StudyResult, labels: readonly RegimenLabel[], showing: Showing): GridView {
  const time = (hours: number) => significant(showing.time(hours))
  const range = (k: number): Entry => {
    const hours = result.regimens[k]!.distribution.flatMap(({ over }) => (over === undefined ? [] : [over]))
    const why = result.regimens[k]!.distribution.find((each) => each.why !== undefined)?.why
    if (hours.length === 0) return entry(undefined, time, why ?? 'no dose is given')
    const [least, most] = [time(Math.min(...hours)), time(Math.max(...hours))]
    return { shown: least === most ? least : `${least} to ${most}` }
  }
  return grid({
    title: 'When a level can be read',
    explanation:
      'to compare with a window: after distribution is over and not from the line that the drug runs in; to estimate the patient: any accurately timed level if the model has the phase',
    columns: regimenColumns(labels),
    folded: false,
    rows: [
      {
        head: `distribution is over, ${showing.timeUnit} after the end of a dose`,
        entries: labels.map((_, k) => range(k))
      },
      {
        head: `90\u00a0% of steady state after, ${showing.timeUnit}`,
        entries: result.regimens.map(({ exposure }) => entryOf(exposure.steadyState, 'reached90', time))
      },
      {
        head: `the same by troughs, ${showing.timeUnit}`,
        entries: result.regimens.map(({ exposure }) => entryOf(exposure.steadyState, 'reached90ByTrough', time))
      }
    ]
  })
}
