import { valueInWords } from '../../patient/covariateWords'
import { type Overview, type OverviewRow, overview } from '../../patient/overview'
import type { StudyResult } from '../../study/result'
import { significant } from './number'
import type { EstimateRow, EstimatesView } from './page'
import { listed, polished, type Showing } from './showing'

const GROUPS: readonly { readonly title: string; readonly parts: readonly (keyof Overview)[] }[] = [
  { title: 'Creatinine clearance', parts: ['creatinineClearances'] },
  { title: 'Indexed GFR', parts: ['indexedRates'] },
  { title: 'Absolute GFR', parts: ['absoluteRates'] },
  { title: 'Weight', parts: ['weights'] },
  { title: 'Body size', parts: ['bodyMassIndex', 'surfaceAreas'] }
]

/** Every size and renal estimate side by side; what cannot be computed stands below its group, with the reason. */
export function estimatesView(result: StudyResult, showing: Showing): EstimatesView {
  const { drugModel } = result.study
  const overviews = result.stretches.map(({ person }) => overview(person, drugModel))
  const columns =
    result.stretches.length === 1 ? [] : result.stretches.map(({ from }) => `from ${showing.typedTime(from)}`)
  const text = (row: OverviewRow) =>
    row.estimate.kind === 'computed' ? shown(valueInWords(row.covariate, row.estimate.value, drugModel)) : '–'
  const groups = GROUPS.map(({ title, parts }) => {
    const stretches = overviews.map((each) => parts.flatMap((part) => each[part]))
    const labels = [...new Set(stretches.flatMap((rows) => rows.map((row) => row.label)))]
    const rows: EstimateRow[] = []
    const missing: Missing[] = []
    for (const label of labels) {
      const found = stretches.map((all) => all.find((row) => row.label === label))
      const [reason] = found.flatMap((row) => (row?.estimate.kind === 'not computed' ? [row.estimate.reason] : []))
      const used = [...new Set(found.flatMap((row) => row?.usedBy ?? []))]
      if (found.every((row) => row?.estimate.kind !== 'computed') && used.length === 0) {
        missing.push({ label: polished(label), reason: reason ?? 'not known' })
        continue
      }
      rows.push({
        label: polished(label),
        values: found.map((row) => ({
          text: row === undefined ? '–' : text(row),
          computed: row?.estimate.kind === 'computed'
        })),
        usedBy: listed(used)
      })
    }
    const unit = commonUnit(rows)
    if (unit !== undefined) {
      return {
        title: `${title}, ${unit}`,
        rows: rows.map((row) => ({
          ...row,
          values: row.values.map((cell) => (cell.computed ? { ...cell, text: cell.text.split('\u00a0')[0]! } : cell))
        })),
        missing: notComputed(missing, rows.length === 0)
      }
    }
    return { title, rows, missing: notComputed(missing, rows.length === 0) }
  })
  return { columns, groups: groups.filter((group) => group.rows.length > 0 || group.missing !== '') }
}

/** All digits of three figures, so that a column lines up: 32 is 32.0. */
function shown(words: string): string {
  const [, number, unit = ''] = /^([\d.]+)(.*)$/.exec(polished(words)) ?? []
  return number === undefined ? words : `${significant(Number(number))}${unit}`
}

/** The unit that every computed value of a group has, to be said once. */
function commonUnit(rows: readonly EstimateRow[]): string | undefined {
  const computed = rows.flatMap(({ values }) => values.filter((cell) => cell.computed))
  const units = new Set(computed.map(({ text }) => text.split('\u00a0').slice(1).join('\u00a0')))
  const [unit] = units
  return units.size === 1 && unit !== '' ? unit : undefined
}

interface Missing {
  readonly label: string
  readonly reason: string
}

/** What could not be computed, by reason; a whole group that lacks one thing is not listed name by name. */
function notComputed(missing: readonly Missing[], whole: boolean): string {
  const reasons = new Map<string, string[]>()
  for (const { label, reason } of missing) reasons.set(reason, [...(reasons.get(reason) ?? []), label])
  if (whole && reasons.size === 1) return `Not computed: ${[...reasons.keys()].join('')}.`
  return [...reasons].map(([reason, labels]) => `Not computed (${reason}): ${labels.join('; ')}.`).join(' ')
}
