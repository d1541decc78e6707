/**
 * w e^w = e^logArgument for a positive argument given by its logarithm, so that it may be as large as it likes: w + ln w =
 * logArgument by Newton's iteration from below, which rises to the root, to about 1e-15 x (1 + |logArgument|) [Corless et al. 1996, Adv. Comput. Math. 5:329,
 * from memory, for the function; the iteration is the obvious one].
 */
export function lambertW(logArgument: number): number {
  let w = logArgument > 1 ? logArgument - Math.log(logArgument) : Math.exp(logArgument - 1)
  for (let count = 0; count < 100; count++) {
    const next = (w * (1 + logArgument - Math.log(w))) / (1 + w)
    if (Math.abs(next - w) <= 2 ** -48 * Math.abs(w)) return next
    w = next
  }
  throw new Error(`Lambert W of e^${logArgument} does not converge`)
}

/** Concentration after a bolus into one compartment with saturable elimination alone: Km W((C0/Km) e^((C0 - Vmax t/V)/Km)). */
export function saturableDecline(given: {
  readonly initial: number
  /** Maximum rate / volume. */
  readonly fastest: number
  readonly half: number
  readonly time: number
}): number {
  const { initial, fastest, half, time } = given
  return half * lambertW(Math.log(initial / half) + (initial - fastest * time) / half)
}
