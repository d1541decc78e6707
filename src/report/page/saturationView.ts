import type { NonlinearView } from '../../pk/nonlinearView'
import { nonlinearViews } from '../../study/nonlinear'
import type { StudyResult } from '../../study/result'
import { type Entry, entry, grid, regimenColumns } from './grid'
import { percent, significant, withUnit } from './number'
import type { GridView, RegimenLabel } from './page'
import { type Prose, value } from './prose'
import { regimenLabels } from './regimenLabel'
import { polished, type Showing, sentence, showingOf } from './showing'

/** What saturation makes of each regimen's dose: the steady-state average against the dose rate, and the limits of it. */
export interface SaturationView {
  readonly grid: GridView
  readonly sentences: readonly Prose[]
  readonly figure: SaturationFigure
}

export interface SaturationFigure {
  readonly curves: readonly SaturationCurve[]
  /** In the unit of the dose rate. */
  readonly capacity?: number
  readonly window?: { readonly low: number; readonly high: number }
  readonly rateUnit: string
  readonly levelUnit: string
  /** The figure in words. */
  readonly label: string
}

export interface SaturationCurve {
  readonly regimen: RegimenLabel
  readonly rates: readonly number[]
  readonly averages: readonly number[]
  /** Where the regimen stands; absent where its dose rate has no steady state. */
  readonly current?: { readonly rate: number; readonly average: number }
}

const RATE_UNIT = 'mg/d'
const perDay = (rate: number) => 24 * rate

interface Viewed {
  readonly label: RegimenLabel
  readonly view: NonlinearView
}

/** The view of a study; undefined for a linear model. */
export function saturationView(result: StudyResult): SaturationView | undefined {
  const views = nonlinearViews(result)
  const labels = regimenLabels(result.regimens.map(({ name }) => name))
  const viewed = views.flatMap((view, k): Viewed[] => (typeof view === 'object' ? [{ label: labels[k]!, view }] : []))
  const untold = views.flatMap((view, k) =>
    typeof view === 'string' ? [[sentence(polished(`${labels[k]!.letter}: ${view}`))]] : []
  )
  if (viewed.length === 0) return undefined
  const showing = showingOf(result.study)
  return {
    grid: saturationGrid(viewed, showing),
    sentences: [...viewed.map((each) => stepSentence(each, showing)), ...untold],
    figure: saturationFigure(viewed, result, showing)
  }
}

function saturationGrid(viewed: readonly Viewed[], showing: Showing): GridView {
  const level = (total: number) => significant(showing.concentration(total))
  const rate = (mgPerHour: number) => significant(perDay(mgPerHour))
  const time = (hours: number) => significant(showing.time(hours))
  const row = (head: string, of: (view: NonlinearView) => Entry) => ({
    head,
    entries: viewed.map(({ view }) => of(view))
  })
  const { levelUnit, timeUnit } = { levelUnit: showing.concentrationUnit, timeUnit: showing.timeUnit }
  const halfLives = ['low limit', 'high limit', 'average'] as const
  return grid({
    title: 'Dose rate and steady state',
    explanation: 'of what repeats at the end, all its doses raised or lowered together, if nothing else changed',
    columns: regimenColumns(viewed.map(({ label }) => label)),
    folded: false,
    rows: [
      row(`dose rate, ${RATE_UNIT}`, (view) => ({ shown: rate(view.doseRate) })),
      row(`capacity, ${RATE_UNIT}`, (view) => entry(view.capacity?.rate, rate, view.why.capacity)),
      row('dose rate as a share of capacity', (view) =>
        entry(
          view.capacity === undefined ? undefined : view.capacity.doseRate / view.capacity.rate,
          percent,
          view.why.capacity
        )
      ),
      row(`steady-state average, ${levelUnit}`, (view) => entry(view.current?.average, level, view.why.current)),
      row(`its rise per ${RATE_UNIT}, ${levelUnit}`, (view) =>
        entry(view.slope === undefined ? undefined : view.slope / 24, level, view.why.slope)
      ),
      row(`dose rate at 80 % of capacity, ${RATE_UNIT}`, (view) => entry(view.at80?.doseRate, rate, view.why.at80)),
      row(`90 % of the change from the present after, ${timeUnit}`, (view) =>
        entry(view.reached90OfChange, time, view.why.reached90OfChange)
      ),
      row(`largest dose rate under the top of the window, ${RATE_UNIT}`, (view) =>
        entry(view.nextStep?.doseRate, rate, view.why.nextStep)
      ),
      row(`average there, ${levelUnit}`, (view) => entry(view.nextStep?.average, level, view.why.nextStep)),
      row(`the same, maximum rate 15 % lower, ${levelUnit}`, (view) => {
        const lower = view.nextStep?.atLowerMaximum
        return typeof lower === 'string'
          ? { shown: undefined, why: lower }
          : entry(lower?.average, level, view.why.nextStep)
      }),
      ...halfLives.map((of) =>
        row(`instantaneous half-life at the ${of}, ${timeUnit}`, (view) =>
          entry(view.halfLives.find((each) => each.of === of)?.halfLife, time, view.why.halfLives ?? 'no such level')
        )
      )
    ]
  })
}

/** How far the next step may go, in words. */
function stepSentence({ label, view }: Viewed, showing: Showing): Prose {
  const { nextStep, current, why } = view
  const shown = (mgPerHour: number) => value(withUnit(significant(perDay(mgPerHour)), RATE_UNIT))
  if (current === undefined || nextStep === undefined) {
    return [sentence(polished(`${label.letter}: ${why.current ?? why.nextStep ?? 'no next step can be told'}`))]
  }
  if (nextStep.rise <= 0) {
    return [
      `${label.letter}: the steady-state peak is at or over the top of the window already; the dose rate under it is `,
      shown(nextStep.doseRate),
      '.'
    ]
  }
  const lower = nextStep.atLowerMaximum
  const tail: Prose =
    typeof lower === 'string'
      ? [`where the maximum rate is 15\u00a0% lower, ${polished(lower)}.`]
      : [
          'where the maximum rate is 15\u00a0% lower, its average would be ',
          value(showing.concentrationText(lower.average)),
          '.'
        ]
  return [
    `${label.letter}: from `,
    shown(view.doseRate),
    ' the largest step that keeps the steady state under the top of the window is to ',
    shown(nextStep.doseRate),
    '; ',
    ...tail
  ]
}

function saturationFigure(viewed: readonly Viewed[], result: StudyResult, showing: Showing): SaturationFigure {
  const window = result.study.targets.find(({ kind }) => kind === 'window')
  const capacities = viewed.flatMap(({ view }) => (view.capacity === undefined ? [] : [perDay(view.capacity.rate)]))
  const capacity = capacities[0]
  const curves = viewed.map(
    ({ label, view }): SaturationCurve => ({
      regimen: label,
      rates: view.curve.map(({ doseRate }) => perDay(doseRate)),
      averages: view.curve.map(({ average }) => showing.concentration(average)),
      ...(view.current !== undefined && {
        current: { rate: perDay(view.current.doseRate), average: showing.concentration(view.current.average) }
      })
    })
  )
  const said = viewed.map(({ label, view }) =>
    view.current === undefined
      ? `${label.letter} has no steady state`
      : `${label.letter} stands at ${significant(perDay(view.doseRate))} ${RATE_UNIT}, ${showing.concentrationText(view.current.average)}`
  )
  return {
    curves,
    ...(capacity !== undefined && capacities.every((each) => Math.abs(each / capacity - 1) < 1e-9) && { capacity }),
    ...(window?.low !== undefined &&
      window.high !== undefined && {
        window: {
          low: showing.concentration(window.low / window.factor),
          high: showing.concentration(window.high / window.factor)
        }
      }),
    rateUnit: RATE_UNIT,
    levelUnit: showing.concentrationUnit,
    label: `Steady-state average against the dose rate: ${said.join('; ')}.`
  }
}
