import type { Hours } from '../units/canonical'
import { multipleOf } from '../units/spacing'
import { MOST_DOSES } from './administrations'
import type { Dose } from './dose'
import { drugFreeState } from './drugFree'
import type { Issue } from './issue'
import { isLinear } from './model'
import type { OperatorStore } from './operatorStore'
import type { DoseLine, Prescription } from './prescription'
import { type Recurring, recurringState } from './recurring'
import { regularDose } from './regularDose'
import type { BodyState } from './state'
import type { Subject } from './subject'
import { isBefore, sameTime } from './times'

/** How a regimen begins. */
export interface Beginning {
  /** At time 0, before anything that enters at that time. */
  readonly state: BodyState
  /** What was given before 0 and enters after it: lagged doses, the rest of infusions and releases. */
  readonly carried: readonly Dose[]
  readonly issues: readonly Issue[]
  readonly notes: readonly string[]
}

/** A regimen that begins in a body without drug. Throws `NumericalFailure` 'no-way-out' where what the body makes never leaves. */
export function emptyBeginning(subject: Subject): Beginning {
  return { state: drugFreeState(subject.model), carried: [], issues: [], notes: [] }
}

/**
 * As if every line that repeats with `at` < `every` had always been given at `at` + k `every`, k < 0 included, to the
 * person as at 0, exceptions left out. An issue where these have no steady state, or, in a model that is not linear, no
 * common period. Throws `NumericalFailure` 'no-way-out' where what enters or is produced can never leave.
 */
export function steadyBeginning(
  prescription: Prescription,
  subject: Subject,
  path: string,
  store: OperatorStore
): Beginning {
  const carried: Dose[] = []
  const issues: Issue[] = []
  const notes: string[] = []
  const repeating: Recurring[] = []
  prescription.lines.forEach((line, index) => {
    if (line.every === undefined) return
    const period = multipleOf(line.every, 1)
    if (!isBefore(line.at, period)) {
      notes.push(
        `dose line ${index + 1} (${line.route}): begins later than one interval, so it is no part of the steady state at 0 h`
      )
      return
    }
    const doses = regularDose(line, subject)
    if ('message' in doses) {
      issues.push({ path: `${path}.doses[${index}].${doses.key}`, message: doses.message })
      return
    }
    repeating.push({ every: line.every, doses })
    for (const dose of doses) {
      const before = carriedOver(dose, line)
      if (before === undefined) issues.push({ path: `${path}.start`, message: tooMany(index) })
      else carried.push(...before)
    }
  })
  if (repeating.length === 0) {
    const body = isLinear(subject.model) ? 'the body is empty' : 'the body has no drug'
    notes.push(`no dose line repeats from the start on: ${body} at 0 h`)
  }
  const outcome = recurringState(subject.model, repeating, store)
  if (outcome.kind === 'steady') return { state: outcome.state, carried, issues, notes }
  issues.push({ path: `${path}.start`, message: outcome.why })
  return { ...emptyBeginning(subject), issues, notes }
}

function tooMany(index: number): string {
  return `dose line ${index + 1}: more than ${MOST_DOSES} doses before 0 h would still be entering`
}

/** What enters at or after 0 of the doses one, two and more intervals before the first; undefined for too many. */
function carriedOver(dose: Dose, line: DoseLine): Dose[] | undefined {
  if (line.every === undefined) return []
  const carried: Dose[] = []
  for (let k = 1; ; k++) {
    const back = multipleOf(line.every, k)
    const left = leftOver(dose, back)
    if (left === undefined) return carried
    if (k > MOST_DOSES) return undefined
    carried.push(left)
  }
}

/** The part of a dose moved back in time that enters at or after 0. */
function leftOver(dose: Dose, back: Hours): Dose | undefined {
  const start = sameTime(dose.start, back) ? 0 : dose.start - back
  if (start >= 0) return { ...dose, start }
  if (dose.kind === 'bolus') return undefined
  const finish = dose.start + dose.duration
  if (!isBefore(back, finish)) return undefined
  const duration = finish - back
  return { ...dose, start: 0, duration, amount: (dose.amount / dose.duration) * duration }
}
