import { type Box, type Figure, pixel, type Shape } from './figure'
import { type Axis, logarithmicAxis } from './figureAxis'
import { timeMarks } from './figureTime'
import type { PhaseCurves } from './page/page'

/** How far down the phases are followed, as a share of the level just after the bolus. */
const DEPTH = 1e-3

/** The fall after a bolus on a log axis: the whole as a full line, each phase's part as a thin one that adds up to it. */
export function phasesFigure(curves: PhaseCurves, width: number): Figure {
  const plot: Box = { x: 44, y: 14, width: width - 44 - 12, height: Math.min(300, Math.max(180, width * 0.4)) }
  const bottom = plot.y + plot.height
  const until = curves.times[curves.times.length - 1] ?? 1
  const y = logarithmicAxis(DEPTH, 1, bottom, plot.y)
  const x = (time: number) => plot.x + (plot.width * time) / until
  const marks = timeMarks({ until, unit: curves.timeUnit, hoursPerUnit: curves.hoursPerUnit, width: plot.width })
  const path = (values: readonly number[]) => {
    let d = ''
    curves.times.forEach((time, k) => {
      const level = values[k]!
      if (level > 0) d += `${d === '' ? 'M' : 'L'}${pixel(x(time))} ${pixel(Math.min(y.place(level), 4 * bottom))}`
    })
    return d
  }
  const shapes: Shape[] = [
    ...y.ticks.flatMap((tick): Shape[] => {
      const at = y.place(tick.at)
      const grid: Shape = { kind: 'line', x1: plot.x, y1: at, x2: plot.x + plot.width, y2: at, look: 'grid' }
      if (tick.label === '') return []
      return [grid, { kind: 'text', x: plot.x - 7, y: at + 4, anchor: 'end', text: tick.label, look: 'label' }]
    }),
    ...marks.words.map(
      (word): Shape => ({
        kind: 'text',
        x: x(word.at),
        y: bottom + 18,
        anchor: word.at === 0 ? 'start' : word.at === until ? 'end' : 'middle',
        text: word.label,
        look: 'label'
      })
    ),
    {
      kind: 'clipped',
      box: plot,
      shapes: [
        ...curves.parts.map(
          (part, k): Shape => ({
            kind: 'path',
            look: `part p${k % 4}${part.ruling ? ' ruling' : ''}`,
            d: path(part.values)
          })
        ),
        { kind: 'path', look: 'whole', d: path(curves.total) }
      ]
    },
    ...curves.parts.map((part, k) => partLabel(part, k, curves.times, x, y, plot))
  ]
  return { width, height: bottom + 26, label: curves.label, shapes }
}

/** A phase is named on its line: where it leaves the plot below, or at the end of it. */
function partLabel(
  part: PhaseCurves['parts'][number],
  k: number,
  times: readonly number[],
  x: (time: number) => number,
  y: Axis,
  plot: Box
): Shape {
  const bottom = plot.y + plot.height
  const place = (at: number) => (part.values[at]! > 0 ? y.place(part.values[at]!) : Number.POSITIVE_INFINITY)
  let last = times.length - 1
  while (last > 0 && place(last) > bottom - 16) last--
  const leaves = last < times.length - 1
  return {
    kind: 'text',
    x: leaves ? x(times[last]!) + 8 : plot.x + plot.width,
    y: leaves ? bottom - 14 - 15 * k : place(last) + 16,
    anchor: leaves ? 'start' : 'end',
    text: part.label,
    look: 'label'
  }
}
