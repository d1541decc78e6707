import { type Box, type Figure, pixel, type Shape } from './figure'
import { type Axis, linearAxis, logarithmicAxis } from './figureAxis'
import { doseLines, LANE } from './figureDoses'
import { timeMarks } from './figureTime'
import type { ChartView, CurveView, SiteView } from './page/chart'

/** Room that a log axis gives below the window and the curves, as a share of the highest level. */
const LOG_DEPTH = 1e-5

export interface FigureSize {
  readonly width: number
  readonly axis: 'linear' | 'log'
}

/**
 * The concentration of every regimen over the window, with the patient's changes, and below it a dose line a regimen
 * on the same time axis. Drawn for a width, so that type and lines keep their size on any screen.
 */
export function curvesFigure(chart: ChartView, site: SiteView, size: FigureSize): Figure {
  const narrow = size.width < 560
  const moments = markedMoments(chart, size.width)
  const rows = Math.max(0, ...moments.map((moment) => moment.row + 1))
  const plot: Box = {
    x: narrow ? 38 : 52,
    y: 10 + 17 * rows,
    width: size.width - (narrow ? 38 : 52) - 30,
    height: narrow ? 236 : Math.min(560, Math.max(300, Math.round(size.width * 0.44)))
  }
  const bottom = plot.y + plot.height
  const lanesTop = bottom + 34
  const height = lanesTop + chart.lanes.length * LANE + 4
  const x = (time: number) => plot.x + (plot.width * time) / chart.until
  const y = levelAxis(site, size.axis, plot)
  const shapes: Shape[] = [
    ...windowBand(site, y, plot, size.axis),
    ...levelGrid(y, plot),
    ...timeGrid(chart, x, plot, height),
    ...sessionBands(chart, x, plot, height),
    ...changeLines(moments, x, plot, height),
    {
      kind: 'clipped',
      box: { ...plot, y: plot.y - 2, height: plot.height + 2 },
      shapes: site.curves.map((curve) => ({
        kind: 'path',
        look: `curve s${curve.regimen.style}`,
        d: pathOf(curve, x, y)
      }))
    },
    ...windowLabel(site, y, plot, narrow),
    ...curveEnds(site, y, plot),
    ...doseLines(chart, x, plot, lanesTop)
  ]
  return { width: size.width, height, label: site.label, shapes }
}

function levelAxis(site: SiteView, kind: 'linear' | 'log', plot: Box): Axis {
  let top = site.window === undefined ? 0 : site.window.high * 1.1
  for (const curve of site.curves) for (const level of curve.values) top = Math.max(top, level)
  if (top === 0) top = 1
  const bottom = plot.y + plot.height
  if (kind === 'linear') return linearAxis(top, bottom, plot.y, Math.max(3, Math.round(plot.height / 70)))
  let low = top
  if (site.window !== undefined && site.window.low > 0) low = Math.min(low, site.window.low * 0.5)
  for (const curve of site.curves) low = Math.min(low, lowestAfterFirstPeak(curve))
  return logarithmicAxis(Math.max(low, top * LOG_DEPTH), top, bottom, plot.y)
}

/** The way up from 0 at the very start would stretch a log axis over decades that nobody reads. */
function lowestAfterFirstPeak(curve: CurveView): number {
  let k = 0
  while (k + 1 < curve.values.length && curve.values[k + 1]! >= curve.values[k]!) k++
  let low = Number.POSITIVE_INFINITY
  for (; k < curve.values.length; k++) if (curve.values[k]! > 0) low = Math.min(low, curve.values[k]!)
  return low
}

/** Straight lines between samples; where a value has no place on the axis the line is broken, never drawn to the floor. */
function pathOf(curve: CurveView, x: (time: number) => number, y: Axis): string {
  let d = ''
  let down = false
  for (let k = 0; k < curve.times.length; k++) {
    const level = curve.values[k]!
    if (level <= y.floor) {
      down = false
      continue
    }
    d += `${down ? 'L' : 'M'}${pixel(x(curve.times[k]!))} ${pixel(y.place(level))}`
    down = true
  }
  return d
}

function windowBand(site: SiteView, y: Axis, plot: Box, axis: 'linear' | 'log'): Shape[] {
  if (site.window === undefined) return []
  const bottom = plot.y + plot.height
  const top = clamp(y.place(site.window.high), plot.y, bottom)
  const reachable = axis === 'linear' || site.window.low > 0
  const low = reachable ? clamp(y.place(site.window.low), plot.y, bottom) : bottom
  return [
    { kind: 'rect', x: plot.x, y: top, width: plot.width, height: low - top, round: 0, look: 'window' },
    line(plot.x, top, plot.x + plot.width, top, 'window-edge'),
    line(plot.x, low, plot.x + plot.width, low, 'window-edge')
  ]
}

function windowLabel(site: SiteView, y: Axis, plot: Box, narrow: boolean): Shape[] {
  if (site.window === undefined) return []
  const at = clamp(y.place(site.window.high), plot.y, plot.y + plot.height) - 6
  const text = narrow ? site.window.label.replace(/^window /, '') : site.window.label
  return [{ kind: 'text', x: plot.x + 6, y: Math.max(at, plot.y + 12), anchor: 'start', text, look: 'label halo' }]
}

function levelGrid(y: Axis, plot: Box): Shape[] {
  const shapes: Shape[] = []
  for (const tick of y.ticks) {
    const at = y.place(tick.at)
    shapes.push(line(plot.x, at, plot.x + plot.width, at, tick.label === '' ? 'grid faint' : 'grid'))
    if (tick.label !== '') {
      shapes.push({ kind: 'text', x: plot.x - 7, y: at + 4, anchor: 'end', text: tick.label, look: 'label' })
    }
  }
  return shapes
}

function timeGrid(chart: ChartView, x: (time: number) => number, plot: Box, height: number): Shape[] {
  const marks = timeMarks({
    until: chart.until,
    unit: chart.timeUnit,
    hoursPerUnit: chart.hoursPerUnit,
    width: plot.width
  })
  const bottom = plot.y + plot.height
  return [
    ...marks.lines.map((at) => line(x(at), plot.y, x(at), height - 4, 'grid')),
    ...marks.words.map(
      (word): Shape => ({
        kind: 'text',
        x: x(word.at),
        y: bottom + 18,
        anchor: 'middle',
        text: word.label,
        look: 'label'
      })
    )
  ]
}

function sessionBands(chart: ChartView, x: (time: number) => number, plot: Box, height: number): Shape[] {
  return chart.sessions.map(
    (session): Shape => ({
      kind: 'rect',
      x: x(session.from),
      y: plot.y,
      width: Math.max(1.5, x(session.to) - x(session.from)),
      height: height - 4 - plot.y,
      round: 0,
      look: 'session',
      title: session.label
    })
  )
}

interface Moment {
  readonly at: number
  readonly label: string
  /** From 0, upwards. */
  readonly row: number
}

/**
 * What is marked on the time axis, ascending, each label in a row above the plot. A label lies above the lines of all
 * later moments that it reaches over, so that no line runs through it. About 6.4 px a letter.
 */
function markedMoments(chart: ChartView, width: number): readonly Moment[] {
  const now = chart.now === undefined ? [] : [{ at: chart.now, label: 'now' }]
  const first = chart.sessions[0]
  const sessions = first === undefined ? [] : [{ at: first.from, label: 'dialysis' }]
  const moments: Moment[] = []
  const labels = new Map<number, string>()
  for (const { at, label } of [...now, ...chart.changes, ...sessions]) {
    const before = labels.get(at)
    labels.set(at, before === undefined ? label : `${before}, ${label}`)
  }
  for (const [at, label] of [...labels].sort(([a], [b]) => b - a)) {
    const end = at + ((6.4 * label.length + 14) / (width - 80)) * chart.until
    const reached = moments.filter((later) => later.at < end).map((later) => later.row + 1)
    moments.push({ at, label, row: Math.max(0, ...reached) })
  }
  return moments.reverse()
}

function changeLines(moments: readonly Moment[], x: (time: number) => number, plot: Box, height: number): Shape[] {
  return moments.flatMap((moment): Shape[] => {
    const at = x(moment.at)
    const baseline = plot.y - 5 - 17 * moment.row
    const leftward = at + 6.4 * moment.label.length > plot.x + plot.width + 24
    return [
      line(at, baseline - 9, at, height - 4, 'moment'),
      {
        kind: 'text',
        x: leftward ? at - 5 : at + 5,
        y: baseline,
        anchor: leftward ? 'end' : 'start',
        text: moment.label,
        look: 'label'
      }
    ]
  })
}

/** The letter at the end of each curve; letters that would meet are set apart and led to their curve. */
function curveEnds(site: SiteView, y: Axis, plot: Box): Shape[] {
  const GAP = 15
  const bottom = plot.y + plot.height
  const ends = site.curves
    .map((curve) => {
      const last = curve.values[curve.values.length - 1] ?? 0
      const at = last > y.floor ? clamp(y.place(last), plot.y, bottom) : bottom
      return { curve, at, shown: at }
    })
    .sort((a, b) => a.at - b.at)
  for (let k = 1; k < ends.length; k++) ends[k]!.shown = Math.max(ends[k]!.at, ends[k - 1]!.shown + GAP)
  let limit = bottom + 4
  for (let k = ends.length - 1; k >= 0; k--) {
    ends[k]!.shown = Math.min(ends[k]!.shown, limit)
    limit = ends[k]!.shown - GAP
  }
  const right = plot.x + plot.width
  return ends.flatMap(({ curve, at, shown }): Shape[] => [
    {
      kind: 'path',
      look: `lead s${curve.regimen.style}`,
      d: `M${pixel(right)} ${pixel(at)}L${pixel(right + 11)} ${pixel(shown)}`
    },
    {
      kind: 'text',
      x: right + 14,
      y: shown + 4.5,
      anchor: 'start',
      text: curve.regimen.letter,
      look: `letter s${curve.regimen.style}`
    }
  ])
}

function line(x1: number, y1: number, x2: number, y2: number, look: string): Shape {
  return { kind: 'line', x1, y1, x2, y2, look }
}

function clamp(x: number, low: number, high: number): number {
  return Math.min(high, Math.max(low, x))
}
