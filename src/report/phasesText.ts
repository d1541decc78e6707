import type { PhasesOfStretch } from '../pk/phases'
import type { StudyResult } from '../study/result'
import { CAUTION } from './caution'
import { nameAndUnit } from './longTable'
import { STRETCH_NAMES } from './phasesDocument'
import { alignedRows, plainNumber, plainPercent } from './plainText'

/** What each value of a stretch is called on a terminal. */
const STRETCH_WORDS: Readonly<Record<keyof typeof STRETCH_NAMES, string>> = {
  rulingPhase: 'ruling phase',
  stiffness: 'stiffness, largest over smallest eigenvalue',
  longestExplicitStep: 'longest stable step of an explicit method',
  explicitSteps: 'such steps to the end',
  vss: 'Vss',
  vz: 'Vz',
  mrt: 'MRT',
  clearance: 'CL',
  terminalHalfLife: 'terminal half-life'
}

/** The phases as they are read on a terminal: three significant figures, a reason for each dash. */
export function phasesText(result: StudyResult): string {
  const lines = [result.study.title, '']
  const apparent = result.study.drugModel.apparent
  for (const stretch of result.phases) lines.push(...stretchText(stretch, apparent), '')
  for (const regimen of result.regimens) {
    lines.push(
      `${regimen.name}: distribution is over, hours after the end of the input`,
      ...alignedRows(
        regimen.distribution.map((over) => [
          `  interval ${over.interval + 1}`,
          plainNumber(over.over),
          over.why ??
            `comparable with a window from ${plainNumber(over.readableFrom)} to ${plainNumber(over.readableTo)} h`
        ])
      ),
      ''
    )
  }
  lines.push(...result.cautions.map((caution) => `Caution: ${caution}.`), CAUTION)
  return `${lines.join('\n')}\n`
}

/** Values that contain the bioavailability where the model's parameters do. */
const APPARENT = new Set<keyof typeof STRETCH_NAMES>(['vss', 'vz', 'clearance'])

function stretchText(stretch: PhasesOfStretch, apparent: boolean): string[] {
  const matrix = alignedRows([
    ['rate matrix, /h', ...stretch.names.map((name) => `from ${name}`)],
    ...stretch.names.map((name, i) => [`into ${name}`, ...(stretch.matrix[i] ?? []).map(plainNumber)]),
    ['out of the body', ...stretch.out.map(plainNumber)]
  ])
  const phases = alignedRows([
    ['phase', 'eigenvalue, /h', 'half-life, h', 'coefficient, /L', 'share of AUC'],
    ...stretch.phases.map((phase, i) => [
      `${i + 1}${i === stretch.rulingPhase ? ' ruling' : ''}`,
      plainNumber(phase.eigenvalue),
      plainNumber(phase.halfLife),
      plainNumber(phase.coefficient),
      plainPercent(phase.shareOfAuc)
    ])
  ])
  const inputs = [...stretch.absorption, ...stretch.effectSites].map(
    (rate) => `${rate.name}: ${plainNumber(rate.rate)} /h, half-life ${plainNumber(rate.halfLife)} h`
  )
  const entries = Object.entries(STRETCH_NAMES) as [keyof typeof STRETCH_NAMES, string][]
  const moments = alignedRows(
    entries
      .filter(([name]) => name !== 'rulingPhase')
      .map(([name, shown]) => {
        const { unit } = nameAndUnit(shown)
        const words = apparent && APPARENT.has(name) ? `${STRETCH_WORDS[name]}/F` : STRETCH_WORDS[name]
        return [words, plainNumber(stretch[name]), unit === '1' ? '' : unit, stretch.why[name] ?? '']
      })
  )
  return [
    `From ${plainNumber(stretch.from)} to ${plainNumber(stretch.to)} h, sessions off`,
    ...[...matrix, '', ...phases, '', ...inputs, ...moments, ...stretch.notes].map((line) => `  ${line}`.trimEnd())
  ]
}
