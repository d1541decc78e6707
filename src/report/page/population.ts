import type { Finding } from '../../patient/findings'
import type { StudyResult } from '../../study/result'
import type { PopulationLine } from './page'
import { polished, sentence } from './showing'

const STANDING: Readonly<Partial<Record<Finding['kind'], PopulationLine['standing']>>> = {
  'inside studied': 'inside',
  'outside studied': 'outside',
  'not known': 'unknown',
  'range not stated': 'unknown'
}

/** Each covariate against the people that the model was built on, then what must be read beside the estimates. */
export function populationLines(result: StudyResult): readonly PopulationLine[] {
  const lines = result.findings.map((finding): PopulationLine | undefined => {
    const standing = STANDING[finding.kind]
    if (standing !== undefined) {
      // The line begins with the standing, so that its sentence need not say it again.
      const short = finding.text.replace(' is inside the studied range; studied: ', '; studied: ')
      return { standing, text: sentence(polished(short)) }
    }
    // Cautions stand in their own list, over everything.
    return finding.severity === 'note' ? { standing: 'note', text: sentence(polished(finding.text)) } : undefined
  })
  const found = lines.filter((line) => line !== undefined)
  return found.filter((line, k) => found.findIndex((other) => other.text === line.text) === k)
}
