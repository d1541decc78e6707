import { expect, test } from 'vitest'
import { planInto, productsIn, type TaylorPlan } from '../../src/numerics/taylorPlan'

function planOf(scale: number, compartments: number, vectors: number): TaylorPlan {
  const plan = { degree: 0, squarings: 0 }
  planInto(scale, compartments, vectors, plan)
  return plan
}

/** Relative truncation error of an entry, in the product form of METHODS 1.4, by plain multiplication. */
function truncation(scale: number, compartments: number, { degree, squarings }: TaylorPlan): number {
  const n = compartments + 2
  let bound = 1
  for (let i = 0; i <= degree; i++) bound *= (scale + Math.max(0, n - 1 - i)) / (i + 1) / (i === 0 ? 1 : 2 ** squarings)
  return bound
}

test('no plan truncates an entry by more than 1e-17 of itself, and none could do with one doubling less', () => {
  for (const compartments of [1, 2, 3, 5, 8, 12, 24]) {
    for (let scale = 1e-6; scale < 1e10; scale *= 3.7) {
      const plan = planOf(scale, compartments, 4)
      const what = `scale ${scale}, ${compartments} compartments, degree ${plan.degree}, ${plan.squarings} doublings`
      expect(truncation(scale, compartments, plan), what).toBeLessThanOrEqual(1.0001e-17)
      if (plan.squarings === 0) continue
      const less = { degree: plan.degree, squarings: plan.squarings - 1 }
      expect(truncation(scale, compartments, less), what).toBeGreaterThan(1e-17)
    }
  }
})

/**
 * Fastest rate x time, compartments, and the products and doublings that may be spent: counts, which no machine changes.
 * Doublings grow with the binary logarithm of the fast times; what is beyond it pays for the digits of tiny entries.
 */
const BUDGETS: readonly [scale: number, compartments: number, products: number, doublings: number][] = [
  [0, 3, 2, 0],
  [0.01, 3, 4, 0],
  [1, 3, 4, 5],
  [1, 12, 6, 3],
  [100, 3, 4, 12],
  [1e4, 4, 4, 19],
  [1e8, 4, 5, 31],
  [1e8, 24, 6, 29]
]

for (const [scale, compartments, products, doublings] of BUDGETS) {
  test(`${compartments} compartments over ${scale} fast times take at most ${products} products and ${doublings} doublings`, () => {
    const plan = planOf(scale, compartments, 4)
    expect(productsIn(plan.degree), 'products').toBeLessThanOrEqual(products)
    expect(plan.squarings, 'doublings').toBeLessThanOrEqual(doublings)
  })
}

test('a series that has no plan is refused', () => {
  expect(() => productsIn(5)).toThrow(RangeError)
})
