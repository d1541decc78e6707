/**
 * The canonical units of the core. The system is coherent: amount / volume is the concentration and
 * clearance / volume is the rate constant, with no factor anywhere below `study/`.
 * The names are documentation that an editor shows; the compiler does not check them.
 */

/** Time [h]. */
export type Hours = number
/** Amount of drug [mg]. */
export type Milligrams = number
/** Volume [L]. */
export type Litres = number
/** Concentration [mg/L]. */
export type MilligramsPerLitre = number
/** Clearance, flow [L/h]. */
export type LitresPerHour = number
/** Rate constant [/h]. */
export type PerHour = number
/** Zero-order input, maximum rate [mg/h]. */
export type MilligramsPerHour = number
/** Second-order rate constant of binding [L/mg/h]. */
export type LitresPerMilligramPerHour = number
/** Exposure, area under a concentration curve [mg.h/L]. */
export type MilligramHoursPerLitre = number
/** Body weight [kg]. */
export type Kilograms = number
/** Body height [cm]. */
export type Centimetres = number
/** Body surface area [m2]. */
export type SquareMetres = number
