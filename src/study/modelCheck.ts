import type { Person } from '../patient/person'
import type { DoseLine } from '../pk/prescription'
import type { Hours } from '../units/canonical'
import type { Kind } from '../units/unitTable'

/** A number that a model must reproduce, in canonical units. */
export interface ModelCheck {
  readonly what:
    | 'terminal half-life'
    | 'parameter'
    | 'Vss'
    | 'mean residence time'
    | 'average at steady state'
    | 'AUC24 at steady state'
    | 'concentration at time'
  /** For `parameter`: which one. */
  readonly parameter?: string
  readonly person: Person
  /** For the last three. */
  readonly lines: readonly DoseLine[]
  /** For `concentration at time`; otherwise absent. */
  readonly at?: Hours
  readonly expected: number
  /** What `expected` is, and the unit that the file states it in. */
  readonly kind: Kind
  readonly unit: string
  readonly relativeTolerance: number
  readonly from: 'printed in the source' | 'closed form' | 'independent code'
  /** Where it stands in the file: `checks[0]`. */
  readonly path: string
}
