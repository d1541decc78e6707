import type { Finding } from '../patient/findings'
import type { Individual } from '../patient/individual'
import type { Person } from '../patient/person'
import type { Question } from '../patient/plausibility'
import type { Course, CourseRequest } from '../pk/course'
import type { DistributionOver } from '../pk/distribution'
import type { DoseOverLimit } from '../pk/doseLimits'
import type { RegimenExposure } from '../pk/exposure'
import type { PhasesOfStretch } from '../pk/phases'
import type { Hours } from '../units/canonical'
import type { Study } from './study'

/** Everything computed for one study; shown only beside the very study that it came from. */
export interface StudyResult {
  readonly study: Study
  /** The individual over each stretch between patient changes, the first from 0. */
  readonly stretches: readonly IndividualStretch[]
  readonly regimens: readonly RegimenResult[]
  /** One block a stretch, sessions off; for a model that is not linear it says why there are no phases. */
  readonly phases: readonly PhasesOfStretch[]
  /** Per covariate: inside, outside, not known; unstable creatinine and the like. */
  readonly findings: readonly Finding[]
  /** What is asked back because it is implausible; nothing is blocked by it. */
  readonly questions: readonly Question[]
  /** What must be read before a number is used, in words; the standing caution is not among them. */
  readonly cautions: readonly string[]
}

export interface IndividualStretch {
  readonly from: Hours
  readonly person: Person
  readonly individual: Individual
}

export interface RegimenResult {
  readonly name: string
  /** What the course was made from; further questions about the regimen start here. */
  readonly request: CourseRequest
  readonly course: Course
  readonly exposure: RegimenExposure
  readonly distribution: readonly DistributionOver[]
  readonly overLimits: readonly DoseOverLimit[]
  /** What was done with the prescription and a reader must know: doses at or after the end not given, amounts capped. */
  readonly notes: readonly string[]
}
