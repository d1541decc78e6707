import { individual } from '../patient/individual'
import type { Issue } from '../pk/issue'
import type { IndividualStretch } from './result'
import type { Study } from './study'

export type IndividualsOutcome =
  | { readonly ok: true; readonly stretches: readonly IndividualStretch[] }
  | { readonly ok: false; readonly issues: readonly Issue[] }

/** The study's model in its patient over every stretch of time, or everything that keeps it from being had. */
export function individualsOf(study: Study): IndividualsOutcome {
  const stretches: IndividualStretch[] = []
  const issues: Issue[] = []
  for (const { from, person, path } of study.people) {
    const outcome = individual(study.drugModel, person, path)
    if (outcome.ok) stretches.push({ from, person, individual: outcome.individual })
    else issues.push(...outcome.issues)
  }
  return issues.length > 0 ? { ok: false, issues } : { ok: true, stretches }
}
