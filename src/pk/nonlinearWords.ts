/** Why notions of linear models have no value in one that is not, and what is shown in their place. */

const NOT_LINEAR = 'the model is not linear'

/** Of phases, eigenvalues, half-lives and all that is read off them. */
export const NO_HALF_LIVES = `${NOT_LINEAR}: its half-lives change with the level; the instantaneous half-life at a level is shown instead`

/** Of accumulation ratios. */
export const NO_ACCUMULATION = `${NOT_LINEAR}: doses do not add up, so that accumulation changes with the dose; the steady-state average against the dose rate is shown instead`

/** Of the effective and the operational half-life. */
export const NO_EFFECTIVE_HALF_LIFE = `${NOT_LINEAR}: no half-life describes its accumulation; the time to 90 % of steady state from the actual curve is shown instead`

/** Of volumes, mean residence time and clearance. */
export const NO_MOMENTS = `${NOT_LINEAR}: its clearance and residence time change with the level; the instantaneous half-life at a level is shown instead`

/** Of the end of distribution. */
export const NO_END_OF_DISTRIBUTION = `${NOT_LINEAR}: it has no phases, so that the end of distribution is not told; follow the local sampling rule`
