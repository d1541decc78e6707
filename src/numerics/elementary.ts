/**
 * The elementary functions of the core, with the same bits in every engine.
 *
 * ECMAScript leaves the last bits of `Math.exp` and its kin to the engine, so that Node and a browser may differ. These
 * are computed by additions, multiplications and exact manipulations of the exponent alone, within about one unit in the
 * last place (the FreeBSD msun algorithms, as published by the stdlib project). `Math.sqrt`, `abs`, `min`, `max`,
 * `floor`, `ceil`, `round` and `trunc` are exact by the standard and are used directly.
 */
export { default as acos } from '@stdlib/math-base-special-acos'
export { default as cos } from '@stdlib/math-base-special-cos'
export { default as exp } from '@stdlib/math-base-special-exp'
export { default as expm1 } from '@stdlib/math-base-special-expm1'
export { default as ln } from '@stdlib/math-base-special-ln'
export { default as log1p } from '@stdlib/math-base-special-log1p'
export { default as pow } from '@stdlib/math-base-special-pow'
