import stdAcos from '@stdlib/math-base-special-acos'
import stdCos from '@stdlib/math-base-special-cos'
import stdExp from '@stdlib/math-base-special-exp'
import stdExpm1 from '@stdlib/math-base-special-expm1'
import stdLn from '@stdlib/math-base-special-ln'
import stdLog1p from '@stdlib/math-base-special-log1p'
import stdPow from '@stdlib/math-base-special-pow'

/**
 * The elementary functions of the core, with the same bits in every engine.
 *
 * ECMAScript leaves the last bits of `Math.exp` and its kin to the engine, so that Node and a browser may differ. These
 * are computed by additions, multiplications and exact manipulations of the exponent alone, within about one unit in the
 * last place (the FreeBSD msun algorithms, as published by the stdlib project). `Math.sqrt`, `abs`, `min`, `max`,
 * `floor`, `ceil`, `round` and `trunc` are exact by the standard and are used directly.
 */
/** Inverse cosine, in radians. */
export const acos: (x: number) => number = stdAcos
/** Cosine of an angle in radians. */
export const cos: (x: number) => number = stdCos
/** e^x. */
export const exp: (x: number) => number = stdExp
/** e^x - 1 without the loss near 0. */
export const expm1: (x: number) => number = stdExpm1
/** Natural logarithm. */
export const ln: (x: number) => number = stdLn
/** ln(1 + x) without the loss near 0. */
export const log1p: (x: number) => number = stdLog1p
/** base to the power of exponent. */
export const pow: (base: number, exponent: number) => number = stdPow
