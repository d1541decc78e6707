import type { Box, Shape } from './figure'
import type { ChartView, DoseMark } from './page/chart'

/** Height of one dose line [px]. */
export const LANE = 30

/** Room that the head of a bolus takes; closer together they are drawn without [px]. */
const HEAD = 11

/** A line a regimen: infusions as bars of their true length, boluses as slim marks with a head, missed doses as outlines. */
export function doseLines(chart: ChartView, x: (time: number) => number, plot: Box, top: number): Shape[] {
  return chart.lanes.flatMap((lane, k): Shape[] => {
    const middle = top + LANE * k + LANE / 2
    const style = `s${lane.regimen.style}`
    return [
      { kind: 'line', x1: plot.x, y1: middle, x2: plot.x + plot.width, y2: middle, look: 'lane' },
      {
        kind: 'text',
        x: plot.x - 9,
        y: middle + 4.5,
        anchor: 'end',
        text: lane.regimen.letter,
        look: `letter ${style}`
      },
      ...lane.doses.flatMap((dose) => doseMark(dose, x, middle, style, lane.doses.length * HEAD < plot.width))
    ]
  })
}

function doseMark(
  dose: DoseMark,
  x: (time: number) => number,
  middle: number,
  style: string,
  headed: boolean
): Shape[] {
  const height = 8 + 14 * Math.min(1, dose.share)
  const look = `${dose.missed ? 'dose missed' : 'dose'} ${style}`
  const left = x(dose.from)
  const title = dose.label
  if (dose.kind === 'infusion') {
    const width = Math.max(4, x(dose.to) - left)
    return [{ kind: 'rect', x: left, y: middle - height / 2, width, height, round: 1.5, look, title }]
  }
  const stem: Shape = {
    kind: 'rect',
    x: left - 1,
    y: middle - height / 2,
    width: 2,
    height,
    round: 0,
    look: `${look} stem`,
    title
  }
  if (!headed) return [stem]
  return [
    stem,
    { kind: 'rect', x: left - 3.5, y: middle - height / 2 - 3.5, width: 7, height: 7, round: 3.5, look, title }
  ]
}
