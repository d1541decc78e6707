/** Every state of something that is edited, without limit. */
export interface History<T> {
  readonly past: readonly T[]
  readonly present: T | undefined
  readonly future: readonly T[]
}

export const NO_HISTORY: History<never> = { past: [], present: undefined, future: [] }

/** A new present; what had been undone is gone. */
export function advanced<T>({ past, present }: History<T>, next: T): History<T> {
  return { past: present === undefined ? past : [...past, present], present: next, future: [] }
}

/** One step back; the same where there is none. */
export function undone<T>(history: History<T>): History<T> {
  const { past, present, future } = history
  const before = past.at(-1)
  if (before === undefined || present === undefined) return history
  return { past: past.slice(0, -1), present: before, future: [present, ...future] }
}

/** One step forward again; the same where there is none. */
export function redone<T>(history: History<T>): History<T> {
  const { past, present, future } = history
  const [next, ...later] = future
  if (next === undefined || present === undefined) return history
  return { past: [...past, present], present: next, future: later }
}
