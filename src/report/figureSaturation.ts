import { type Box, type Figure, pixel, type Shape } from './figure'
import { type Axis, linearAxis } from './figureAxis'
import type { SaturationCurve, SaturationFigure } from './page/saturationView'

/** How far above the window, or the highest present average, the axis goes: beyond it the curve only climbs. */
const ABOVE = 1.6

/** The steady-state average against the dose rate: a curve a regimen, its present dose as a dot, capacity as a line. */
export function saturationFigure(view: SaturationFigure, width: number): Figure {
  const plot: Box = { x: 48, y: 14, width: width - 48 - 26, height: Math.min(320, Math.max(200, width * 0.5)) }
  const bottom = plot.y + plot.height
  const present = view.curves.map(({ current }) => current?.average ?? 0)
  const highest = Math.max(view.window?.high ?? 0, ...present)
  const y = linearAxis(highest > 0 ? ABOVE * highest : 1, bottom, plot.y, 5)
  const top = Math.max(view.capacity ?? 0, ...view.curves.flatMap(({ rates }) => rates))
  const x = linearAxis(top * 1.04, plot.x, plot.x + plot.width, width < 420 ? 4 : 6)
  return {
    width,
    height: bottom + 40,
    label: view.label,
    shapes: [
      ...band(view, y, plot),
      ...y.ticks.flatMap((tick): Shape[] => [
        { kind: 'line', x1: plot.x, y1: y.place(tick.at), x2: plot.x + plot.width, y2: y.place(tick.at), look: 'grid' },
        { kind: 'text', x: plot.x - 7, y: y.place(tick.at) + 4, anchor: 'end', text: tick.label, look: 'label' }
      ]),
      ...x.ticks
        .filter((tick) => x.place(tick.at) <= plot.x + plot.width + 1)
        .map(
          (tick): Shape => ({
            kind: 'text',
            x: x.place(tick.at),
            y: bottom + 18,
            anchor: 'middle',
            text: tick.label,
            look: 'label'
          })
        ),
      {
        kind: 'text',
        x: plot.x + plot.width,
        y: bottom + 35,
        anchor: 'end',
        text: `dose rate, ${view.rateUnit}`,
        look: 'label'
      },
      ...capacityLine(view, x, plot),
      {
        kind: 'clipped',
        box: { ...plot, y: plot.y - 2, height: plot.height + 4 },
        shapes: view.curves.map((curve) => ({
          kind: 'path',
          look: `curve s${curve.regimen.style}`,
          d: pathOf(curve, x, y, plot)
        }))
      },
      ...view.curves.flatMap((curve) => presentDose(curve, x, y))
    ]
  }
}

function band(view: SaturationFigure, y: Axis, plot: Box): Shape[] {
  if (view.window === undefined) return []
  const from = Math.max(plot.y, y.place(view.window.high))
  const height = y.place(view.window.low) - from
  return [{ kind: 'rect', x: plot.x, y: from, width: plot.width, height, round: 0, look: 'window' }]
}

function capacityLine(view: SaturationFigure, x: Axis, plot: Box): Shape[] {
  if (view.capacity === undefined) return []
  const at = x.place(view.capacity)
  return [
    { kind: 'line', x1: at, y1: plot.y, x2: at, y2: plot.y + plot.height, look: 'moment' },
    { kind: 'text', x: at - 6, y: plot.y + 12, anchor: 'end', text: 'capacity', look: 'label halo' }
  ]
}

function pathOf(curve: SaturationCurve, x: Axis, y: Axis, plot: Box): string {
  return curve.rates
    .map((rate, k) => {
      const level = Math.max(y.place(curve.averages[k]!), plot.y - 4 * plot.height)
      return `${k === 0 ? 'M' : 'L'}${pixel(x.place(rate))} ${pixel(level)}`
    })
    .join('')
}

/** A square of the regimen's colour where it stands, with its letter. */
function presentDose({ current, regimen }: SaturationCurve, x: Axis, y: Axis): Shape[] {
  if (current === undefined) return []
  const at = { x: x.place(current.rate), y: y.place(current.average) }
  return [
    { kind: 'rect', x: at.x - 5, y: at.y - 5, width: 10, height: 10, round: 2, look: `dose s${regimen.style}` },
    {
      kind: 'text',
      x: at.x - 10,
      y: at.y - 6,
      anchor: 'end',
      text: regimen.letter,
      look: `letter halo s${regimen.style}`
    }
  ]
}
