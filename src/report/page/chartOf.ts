import type { Administration } from '../../pk/dose'
import type { StudyResult } from '../../study/result'
import { fromCanonical } from '../../units/quantity'
import { sampledSeries } from '../series'
import type { ChartView, CurveView, DoseMark } from './chart'
import { shownUnit, significant, typed } from './number'
import type { RegimenLabel } from './page'
import { changeLabel } from './patientNote'
import { listed, polished, type Showing } from './showing'
import { totalLimits } from './targetWords'

/** Points of one curve: enough that no corner is seen, few enough that a redraw is quick. */
const POINTS = 400

/** The curves of a study and what stands on their time axis, in the units of the screen. */
export function chartOf(result: StudyResult, labels: readonly RegimenLabel[], showing: Showing): ChartView {
  const { study } = result
  const curves = result.regimens.map((regimen, k): CurveView => {
    const series = sampledSeries(regimen.course.trajectory, { kind: 'observed' }, POINTS)
    return {
      regimen: labels[k]!,
      times: series.times.map(showing.time),
      values: series.values.map(showing.concentration)
    }
  })
  const window = windowOf(result, showing)
  const { name, matrix } = study.drugModel.drug
  const what = `${showing.unbound}concentration of ${name} in ${matrix}`
  return {
    title: `${capital(what)}, ${shownUnit(showing.concentrationUnit)}`,
    unit: shownUnit(showing.concentrationUnit),
    timeUnit: showing.timeUnit,
    hoursPerUnit: 1 / fromCanonical('time', 1, showing.timeUnit).value,
    until: showing.time(study.sampling.until),
    curves,
    ...(window === undefined ? {} : { window }),
    changes: study.people.slice(1).map(({ from, person }, k) => ({
      at: showing.time(from),
      label: changeLabel(study.people[k]!.person, person, study.drugModel)
    })),
    ...(study.now === undefined ? {} : { now: showing.time(study.now) }),
    sessions: (result.regimens[0]?.course.sessions ?? []).map(({ start, duration }) => ({
      from: showing.time(start),
      to: showing.time(start + duration),
      label: `dialysis from ${showing.typedTime(start)} over ${showing.typedTime(duration)}`
    })),
    lanes: lanesOf(result, labels, showing),
    label: labelOf(result, labels, showing, what, window)
  }
}

/** The first window on the observed concentration. */
function windowOf(result: StudyResult, showing: Showing): ChartView['window'] {
  const target = result.study.targets.find(({ kind, signal }) => kind === 'window' && signal.kind === 'observed')
  if (target === undefined) return undefined
  const limits = totalLimits(target)
  const low = showing.concentration(limits.low)
  const high = showing.concentration(limits.high)
  const unit = shownUnit(showing.concentrationUnit)
  return { low, high, label: `window ${typed(low)} to ${typed(high)}\u00a0${unit}` }
}

function lanesOf(result: StudyResult, labels: readonly RegimenLabel[], showing: Showing): ChartView['lanes'] {
  const all = result.regimens.flatMap(({ course }) => course.administrations)
  const largest = Math.max(...all.map(({ amount }) => amount), Number.MIN_VALUE)
  return result.regimens.map(({ course }, k) => ({
    regimen: labels[k]!,
    doses: course.administrations.map((given): DoseMark => {
      const planned = given.missed ? plannedDuration(course.administrations, given) : given.duration
      return {
        kind: planned > 0 ? 'infusion' : 'bolus',
        from: showing.time(given.at),
        to: showing.time(given.at + planned),
        share: given.missed ? plannedShare(course.administrations, given, largest) : given.amount / largest,
        missed: given.missed,
        label: doseLabel(given, showing)
      }
    })
  }))
}

/** A missed dose is drawn as large and as long as the others of its line. */
function sibling(all: readonly Administration[], missed: Administration): Administration | undefined {
  return all.find((other) => other.line === missed.line && !other.missed)
}

function plannedDuration(all: readonly Administration[], missed: Administration): number {
  return sibling(all, missed)?.duration ?? 0
}

function plannedShare(all: readonly Administration[], missed: Administration, largest: number): number {
  return (sibling(all, missed)?.amount ?? largest / 2) / largest
}

function doseLabel(given: Administration, showing: Showing): string {
  if (given.missed) return polished(given.departure ?? `missed at ${showing.typedTime(given.at)}`)
  const over = given.duration > 0 ? ` over ${showing.typedTime(given.duration)}` : ''
  const departure = given.departure === undefined ? '' : ` (${polished(given.departure)})`
  return `${showing.typedAmount(given.productAmount)}${over} ${given.route} at ${showing.typedTime(given.at)}${departure}`
}

/** The figure in words: what, how long, between which levels each curve runs, and the window. */
function labelOf(
  result: StudyResult,
  labels: readonly RegimenLabel[],
  showing: Showing,
  what: string,
  window: ChartView['window']
): string {
  const each = result.regimens.map(({ exposure }, k) => {
    const peak = Math.max(0, ...exposure.intervals.map((interval) => interval.peak))
    return `${labels[k]!.letter}, ${labels[k]!.name}, peaks at ${significant(showing.concentration(peak))}`
  })
  const count = result.regimens.length === 1 ? 'one regimen' : `${result.regimens.length} regimens`
  const band = window === undefined ? '' : `; ${window.label} shaded`
  return `${capital(what)} over ${showing.typedTime(result.study.sampling.until)} for ${count}: ${listed(each)} ${shownUnit(showing.concentrationUnit)}${band}. The exposure and concentration tables hold the numbers.`
}

function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1)
}
