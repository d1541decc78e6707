import { pow } from '../numerics/elementary'
import type { Centimetres, Kilograms, SquareMetres } from '../units/canonical'

export type Sex = 'female' | 'male'

/** Body surface area [m2]: sqrt(W H / 3600). Mosteller RD 1987 N Engl J Med 317:1098. */
export function mosteller(body: { weight: Kilograms; height: Centimetres }): SquareMetres {
  return Math.sqrt((body.weight * body.height) / 3600)
}

/** Body surface area [m2]. Du Bois D, Du Bois EF 1916 Arch Intern Med 17:863. */
export function duBois(body: { weight: Kilograms; height: Centimetres }): SquareMetres {
  return 0.007184 * pow(body.weight, 0.425) * pow(body.height, 0.725)
}

/** Body surface area [m2]. Haycock GB et al 1978 J Pediatr 93:62. */
export function haycock(body: { weight: Kilograms; height: Centimetres }): SquareMetres {
  return 0.024265 * pow(body.weight, 0.5378) * pow(body.height, 0.3964)
}

/** Body surface area [m2]. Gehan EA, George SL 1970 Cancer Chemother Rep 54:225 (volume and page from memory). */
export function gehanGeorge(body: { weight: Kilograms; height: Centimetres }): SquareMetres {
  return 0.0235 * pow(body.weight, 0.51456) * pow(body.height, 0.42246)
}

/** Body mass index [kg/m2]. */
export function bodyMassIndex(body: { weight: Kilograms; height: Centimetres }): number {
  const metres = body.height / 100
  return body.weight / (metres * metres)
}

/** Height from which Devine's equation counts up, 60 inches [cm]; below it the straight line is extrapolated. */
export const DEVINE_LOWEST_HEIGHT: Centimetres = 152.4

/**
 * Ideal weight [kg]: 50 (men) or 45.5 (women) + 2.3 for each inch over 60. Devine BJ 1974 Drug Intell Clin Pharm 8:650.
 * Below `DEVINE_LOWEST_HEIGHT` the line is extrapolated, and reaches 0 near 97 cm (men) and 102 cm (women).
 */
export function devine(body: { sex: Sex; height: Centimetres }): Kilograms {
  return (body.sex === 'female' ? 45.5 : 50) + (2.3 * (body.height - DEVINE_LOWEST_HEIGHT)) / 2.54
}

/** Adjusted weight [kg]: ideal + 0.4 (actual - ideal), but the actual weight where that is lower. */
export function adjustedWeight(weights: { actual: Kilograms; ideal: Kilograms }): Kilograms {
  return Math.min(weights.actual, weights.ideal + 0.4 * (weights.actual - weights.ideal))
}

/** Lean (fat-free) weight [kg]. Janmahasatian S et al 2005 Clin Pharmacokinet 44:1051. Rises with weight throughout. */
export function janmahasatian(body: { sex: Sex; weight: Kilograms; height: Centimetres }): Kilograms {
  const index = bodyMassIndex(body)
  const divisor = body.sex === 'female' ? 8780 + 244 * index : 6680 + 216 * index
  return (9270 * body.weight) / divisor
}

/** James WPT 1976, Research on obesity, HMSO: lean = linear W - quadratic (W / H)^2, W in kg, H in cm. */
const JAMES = { female: { linear: 1.07, quadratic: 148 }, male: { linear: 1.1, quadratic: 128 } }

/**
 * Lean weight [kg] by James. The parabola turns over at `jamesTurningPoint`: above it a heavier person comes out leaner,
 * which no body does; the caller must not use it there.
 */
export function james(body: { sex: Sex; weight: Kilograms; height: Centimetres }): Kilograms {
  const { linear, quadratic } = JAMES[body.sex]
  const ratio = body.weight / body.height
  return linear * body.weight - quadratic * ratio * ratio
}

/** Weight [kg] at which James's parabola turns over: a body mass index of 36.1 kg/m2 (women) and 43.0 (men). */
export function jamesTurningPoint(body: { sex: Sex; height: Centimetres }): Kilograms {
  const { linear, quadratic } = JAMES[body.sex]
  return (linear * body.height * body.height) / (2 * quadratic)
}
