import type { StudyFile } from '../file/studySchema'
import { formatPath, type Step } from '../path'
import type { Choice } from './place'

/** The value at a path of a file; undefined where the path leads nowhere. */
export function valueAt(file: StudyFile, path: readonly Step[]): unknown {
  return path.reduce<unknown>((holder, step) => memberOf(holder, step), file)
}

/**
 * The file with one value put in place of another; undefined takes the key, or the entry of a list, away. What is not on
 * the path is shared with the file before, which stays as it was. Throws `RangeError` where the path leads nowhere.
 */
export function setValue(file: StudyFile, path: readonly Step[], value: unknown): StudyFile {
  if (path.length === 0) throw new RangeError('a value is set inside a file, not in place of it')
  return replaced(file, path, value, path) as StudyFile
}

/** The file with one of a few words chosen at a path, and what must stand beside it. */
export function setChoice(file: StudyFile, path: readonly Step[], { value, beside }: Choice): StudyFile {
  return Object.entries(beside ?? {}).reduce(
    (edited, [key, member]) => setValue(edited, [...path.slice(0, -1), key], member),
    setValue(file, path, value)
  )
}

function replaced(holder: unknown, rest: readonly Step[], value: unknown, path: readonly Step[]): unknown {
  const [step, ...further] = rest
  if (step === undefined) return value
  const inside = further.length === 0 ? value : replaced(memberOf(holder, step), further, value, path)
  if (Array.isArray(holder) && typeof step === 'number' && step >= 0 && step < holder.length) {
    return inside === undefined ? holder.toSpliced(step, 1) : holder.with(step, inside)
  }
  if (typeof holder !== 'object' || holder === null || Array.isArray(holder) || typeof step !== 'string') {
    throw new RangeError(`${formatPath(path)} leads nowhere in this file`)
  }
  if (inside !== undefined) return { ...holder, [step]: inside }
  const { [step]: _, ...others } = holder as Record<string, unknown>
  return others
}

function memberOf(holder: unknown, step: Step): unknown {
  if (typeof holder !== 'object' || holder === null || !Object.hasOwn(holder, step)) return undefined
  return (holder as Record<Step, unknown>)[step]
}
