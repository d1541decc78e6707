import { pow } from '../numerics/elementary'
import type { Kilograms } from '../units/canonical'
import type { AbsoluteFiltration } from './renalFunction'

/** Rhodin MM et al 2009 Pediatr Nephrol 24:67: half of the adult filtration at 47.7 weeks, Hill exponent 3.4. */
const HALF_MATURE_WEEKS = 47.7
const HILL = 3.4
/** Filtration of a mature body of 70 kg [mL/min], same source (this number from memory). */
const MATURE = 121.2

/** Share of the size-adjusted adult filtration at a postmenstrual age, 0 to 1: x^e / (x^e + half^e). */
export function renalMaturation(postmenstrualAgeWeeks: number): number {
  // Divided through by x^e: no power of a large age can overflow.
  return 1 / (1 + pow(HALF_MATURE_WEEKS / postmenstrualAgeWeeks, HILL))
}

/** Expected filtration of healthy kidneys at this size and postmenstrual age: 121.2 (W / 70)^0.75 x maturation. */
export function maturedFiltration(child: { weight: Kilograms; postmenstrualAgeWeeks: number }): AbsoluteFiltration {
  return {
    kind: 'absolute',
    mlPerMin: MATURE * pow(child.weight / 70, 0.75) * renalMaturation(child.postmenstrualAgeWeeks)
  }
}
