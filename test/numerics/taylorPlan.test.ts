import { expect, test } from 'vitest'
import { planInto, type TaylorPlan } from '../../src/numerics/taylorPlan'

function planOf(scale: number, compartments: number): TaylorPlan {
  const plan = { degree: 0, stride: 0, squarings: 0 }
  planInto(scale, compartments, plan)
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
      const plan = planOf(scale, compartments)
      const what = `scale ${scale}, ${compartments} compartments, degree ${plan.degree}, ${plan.squarings} doublings`
      expect(truncation(scale, compartments, plan), what).toBeLessThanOrEqual(1.0001e-17)
      if (plan.squarings === 0) continue
      const less = { ...plan, squarings: plan.squarings - 1 }
      expect(truncation(scale, compartments, less), what).toBeGreaterThan(1e-17)
    }
  }
})

/** Matrix products of the polynomial: its low powers, then Horner's rule in N^stride. */
function productsIn({ degree, stride }: TaylorPlan): number {
  return stride - 1 + degree / stride - 1
}

/**
 * Fastest rate x time, compartments, and the products and doublings that may be spent: counts, which no machine changes.
 * Doublings grow with the binary logarithm of the fast times; what is beyond it pays for the digits of tiny entries.
 */
const BUDGETS: readonly [scale: number, compartments: number, products: number, doublings: number][] = [
  [0, 3, 2, 0],
  [0.01, 3, 4, 0],
  [1, 3, 6, 1],
  [1, 12, 6, 3],
  [100, 3, 6, 8],
  [1e4, 4, 6, 15],
  [1e8, 4, 6, 29],
  [1e8, 24, 6, 29]
]

for (const [scale, compartments, products, doublings] of BUDGETS) {
  test(`${compartments} compartments over ${scale} fast times take at most ${products} products and ${doublings} doublings`, () => {
    const plan = planOf(scale, compartments)
    expect(productsIn(plan), 'products').toBeLessThanOrEqual(products)
    expect(plan.squarings, 'doublings').toBeLessThanOrEqual(doublings)
  })
}
