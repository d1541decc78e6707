import type { NonlinearView } from '../pk/nonlinearView'
import { alignedRows, plainNumber } from './plainText'

/** What a model that is not linear makes of the dose, as it is read on a terminal; nothing for a linear model. */
export function nonlinearText(view: NonlinearView | string | undefined): string[] {
  if (view === undefined) return []
  const title = '  What saturation makes of the dose'
  if (typeof view === 'string') return ['', title, `  ${view}`]
  const { why, nextStep } = view
  const lower = nextStep?.atLowerMaximum
  const rows = alignedRows([
    ['dose rate', perDay(view.doseRate), 'mg/d', ''],
    ['capacity', perDay(view.capacity?.rate), 'mg/d', why.capacity ?? ''],
    ['steady-state average', plainNumber(view.current?.average), 'mg/L', why.current ?? ''],
    [
      'its rise per mg/d of dose rate',
      plainNumber(view.slope === undefined ? undefined : view.slope / 24),
      'mg/L',
      why.slope ?? ''
    ],
    ['dose rate at 80 % of capacity', perDay(view.at80?.doseRate), 'mg/d', why.at80 ?? ''],
    ['average there', plainNumber(view.at80?.average), 'mg/L', ''],
    [
      '90 % of the change from the present reached after',
      plainNumber(view.reached90OfChange),
      'h',
      why.reached90OfChange ?? ''
    ],
    ['largest dose rate under the top of the window', perDay(nextStep?.doseRate), 'mg/d', why.nextStep ?? ''],
    ['average there', plainNumber(nextStep?.average), 'mg/L', ''],
    [
      'the same at a maximum rate 15 % lower',
      plainNumber(typeof lower === 'string' ? undefined : lower?.average),
      'mg/L',
      typeof lower === 'string' ? lower : ''
    ],
    ...view.halfLives.map(({ of, level, halfLife }) => [
      `instantaneous half-life at the ${of}, ${plainNumber(level)} mg/L`,
      plainNumber(halfLife),
      'h',
      ''
    ])
  ])
  return ['', title, ...rows.map((row) => `  ${row}`)]
}

function perDay(rate: number | undefined): string {
  return plainNumber(rate === undefined ? undefined : 24 * rate)
}
