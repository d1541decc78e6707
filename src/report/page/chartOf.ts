import type { Administration } from '../../pk/dose'
import type { Signal } from '../../pk/trajectory'
import type { StudyResult } from '../../study/result'
import { sampledSeries } from '../series'
import type { ChartView, CurveView, DoseMark, SiteView } from './chart'
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
  const sites = sitesOf(result)
  const firstWindow = study.targets.find(({ kind }) => kind === 'window')?.signal
  const first = sites.findIndex(({ signal }) => firstWindow !== undefined && sameSignal(signal, firstWindow))
  return {
    timeUnit: showing.timeUnit,
    hoursPerUnit: 1 / showing.time(1),
    until: showing.time(study.sampling.until),
    sites: sites.map((site) => siteView(site, result, labels, showing)),
    firstSite: Math.max(0, first),
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
    lanes: lanesOf(result, labels, showing)
  }
}

interface Site {
  readonly name: string
  readonly signal: Signal
}

function sitesOf(result: StudyResult): readonly Site[] {
  const [stretch] = result.stretches
  if (stretch === undefined) throw new RangeError('a result has a stretch from time 0 on')
  const { effectSites, observations } = stretch.individual.subject.model
  return [
    { name: result.study.drugModel.drug.matrix, signal: { kind: 'observed' } },
    ...effectSites.map(({ name }, index): Site => ({ name, signal: { kind: 'effect-site', index } })),
    ...observations.map(({ name }, index): Site => ({ name, signal: { kind: 'observation', index } }))
  ]
}

function sameSignal(a: Signal, b: Signal): boolean {
  if (a.kind === 'observed' || b.kind === 'observed') return a.kind === b.kind
  return a.kind === b.kind && a.index === b.index
}

function siteView(site: Site, result: StudyResult, labels: readonly RegimenLabel[], showing: Showing): SiteView {
  const curves = result.regimens.map((regimen, k): CurveView => {
    const series = sampledSeries(regimen.course.trajectory, site.signal, POINTS)
    return {
      regimen: labels[k]!,
      times: series.times.map(showing.time),
      values: series.values.map(showing.concentration)
    }
  })
  const unit = shownUnit(showing.concentrationUnit)
  const where = site.signal.kind === 'effect-site' ? `at the effect site ${site.name}` : `in ${site.name}`
  const what = `${showing.unbound}concentration of ${result.study.drugModel.drug.name} ${where}`
  const window = windowOf(site, result, showing)
  const peaks = curves.map(
    ({ regimen, values }) =>
      `${regimen.letter}, ${regimen.name}, reaches ${significant(values.reduce((a, b) => Math.max(a, b), 0))}`
  )
  const count = curves.length === 1 ? 'one regimen' : `${curves.length} regimens`
  const until = showing.typedTime(result.study.sampling.until)
  const band = window === undefined ? '' : `; ${window.label} shaded`
  return {
    name: site.name,
    title: `${capital(what)}, ${unit}`,
    curves,
    ...(window === undefined ? {} : { window }),
    label: `${capital(what)} over ${until} for ${count}: ${listed(peaks)} ${unit} at most${band}. The tables below hold the numbers.`
  }
}

/** The first window on the site's concentration. */
function windowOf(site: Site, result: StudyResult, showing: Showing): SiteView['window'] {
  const target = result.study.targets.find(({ kind, signal }) => kind === 'window' && sameSignal(signal, site.signal))
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

function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1)
}
