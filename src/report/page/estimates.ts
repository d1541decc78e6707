import { valueInWords } from '../../patient/covariateWords'
import { type Overview, type OverviewRow, overview } from '../../patient/overview'
import type { StudyResult } from '../../study/result'
import type { EstimatesView } from './page'
import { listed, polished, type Showing } from './showing'

const GROUPS: readonly { readonly title: string; readonly parts: readonly (keyof Overview)[] }[] = [
  { title: 'Creatinine clearance', parts: ['creatinineClearances'] },
  { title: 'GFR, per 1.73 m²', parts: ['indexedRates'] },
  { title: 'GFR, absolute', parts: ['absoluteRates'] },
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
    row.estimate.kind === 'computed' ? polished(valueInWords(row.covariate, row.estimate.value, drugModel)) : '–'
  const groups = GROUPS.map(({ title, parts }) => {
    const stretches = overviews.map((each) => parts.flatMap((part) => each[part]))
    const labels = [...new Set(stretches.flatMap((rows) => rows.map((row) => row.label)))]
    const rows: EstimatesView['groups'][number]['rows'][number][] = []
    const missing: string[] = []
    for (const label of labels) {
      const found = stretches.map((all) => all.find((row) => row.label === label))
      const [reason] = found.flatMap((row) => (row?.estimate.kind === 'not computed' ? [row.estimate.reason] : []))
      const used = [...new Set(found.flatMap((row) => row?.usedBy ?? []))]
      if (found.every((row) => row?.estimate.kind !== 'computed') && used.length === 0) {
        missing.push(`${polished(label)} (${reason ?? 'not known'})`)
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
    return { title, rows, missing: missing.length === 0 ? '' : `Not computed: ${missing.join('; ')}.` }
  })
  return { columns, groups: groups.filter((group) => group.rows.length > 0 || group.missing !== '') }
}
