import type { DrugModel } from '../patient/drugModel'
import type { Person } from '../patient/person'
import type { Prescription, SessionLine } from '../pk/prescription'
import type { Target } from '../pk/target'
import type { Hours, MilligramsPerLitre } from '../units/canonical'
import type { Quantity } from '../units/quantity'
import type { Spacing } from '../units/spacing'
import type { ModelCheck } from './modelCheck'

/** A person from one time on, until the next entry; the first is at 0. Canonical units. */
export interface PersonStretch {
  readonly from: Hours
  readonly person: Person
  /** Where the values of this stretch stand in the file: `patient` or `patient.changes[0]`. */
  readonly path: string
  /** Its quantities as they were typed, for questions in the unit typed. */
  readonly typed: Readonly<Record<string, Quantity>>
}

/** A study, checked and canonical: everything that one run needs. */
export interface Study {
  readonly title: string
  readonly drugModel: DrugModel
  /** What the model itself says that it must reproduce. */
  readonly modelChecks: readonly ModelCheck[]
  readonly people: readonly PersonStretch[]
  readonly sessions: readonly SessionLine[]
  readonly regimens: readonly StudyRegimen[]
  readonly targets: readonly Target[]
  readonly mic?: MilligramsPerLitre
  readonly now?: Hours
  readonly sampling: Sampling
  /** Time of day of time 0, as `21:15`. */
  readonly clock?: string
  readonly display: Display
  readonly acceptAssumed: boolean
  /** SHA-256 of the study file's RFC 8785 form, in lower-case hexadecimal. */
  readonly hash: string
}

export interface StudyRegimen extends Prescription {
  /** Reasons given for doses over a limit, by position of the line; a dose over a limit without one is a caution. */
  readonly reasons: readonly (string | undefined)[]
}

export interface Sampling {
  readonly until: Hours
  readonly every: Spacing
  readonly also: readonly Hours[]
}

/** How numbers are shown; never enters a computation. */
export interface Display {
  readonly time: string
  readonly concentration: string
  readonly amount: string
  readonly unbound: boolean
}
