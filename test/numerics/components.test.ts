import { expect, test } from 'vitest'
import { stronglyConnected } from '../../src/numerics/components'
import { compartments } from './compartments'

test('compartments between which drug goes to and fro belong together, and components come in the order of the drug', () => {
  const rates = compartments(
    7,
    [
      [6, 0, 1],
      [0, 4, 1],
      [4, 2, 1],
      [2, 0, 1],
      [2, 3, 1],
      [3, 5, 1],
      [5, 3, 1],
      [5, 1, 1]
    ],
    [[1, 1]]
  )
  expect(stronglyConnected(rates)).toEqual([[6], [0, 2, 4], [3, 5], [1]])
})

test('compartments without connections are each on their own', () => {
  const found = stronglyConnected(compartments(3, [], []))
  expect([...found].sort()).toEqual([[0], [1], [2]])
})
