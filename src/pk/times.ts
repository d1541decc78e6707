import type { Hours } from '../units/canonical'

/** Times closer than this, relative to the larger, are one time. */
const ONE_TIME = 1e-12

/** Whether two times are one: within 1e-12 relative. Time 0 is only itself. */
export function sameTime(a: Hours, b: Hours): boolean {
  return a === b || Math.abs(a - b) <= ONE_TIME * Math.max(Math.abs(a), Math.abs(b))
}

/** Whether `a` lies before `b` and is not the same time. */
export function isBefore(a: Hours, b: Hours): boolean {
  return a < b && !sameTime(a, b)
}
