import { expect, test } from 'vitest'
import { advanced, type History, NO_HISTORY, redone, undone } from '../../src/app/history'

const after = (...states: number[]) => states.reduce<History<number>>((all, state) => advanced(all, state), NO_HISTORY)

test('every one of many states is undone and redone in its order', () => {
  const states = Array.from({ length: 500 }, (_, k) => k)
  let history = after(...states)
  for (const state of states.toReversed()) {
    expect(history.present).toBe(state)
    history = undone(history)
  }
  expect(history.present).toBe(0)
  for (const state of states) {
    expect(history.present).toBe(state)
    history = redone(history)
  }
  expect(history.present).toBe(499)
})

test('at either end there is nothing more to undo or to redo', () => {
  const history = after(1)
  expect(undone(history)).toBe(history)
  expect(redone(history)).toBe(history)
  expect(undone(NO_HISTORY)).toBe(NO_HISTORY)
})

test('what was undone is gone once something new is done', () => {
  const history = advanced(undone(after(1, 2, 3)), 4)
  expect(history).toEqual({ past: [1, 2], present: 4, future: [] })
})
