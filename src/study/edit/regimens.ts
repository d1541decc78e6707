import type { RegimenFile } from '../file/doseSchema'
import type { StudyFile } from '../file/studySchema'

/** The longest name that a file takes. */
const LONGEST_NAME = 200

/** The file with a copy of a regimen behind it, under a name that no other has. */
export function copyRegimen(file: StudyFile, index: number): StudyFile {
  const copied = regimenOf(file, index)
  const copy = { ...copied, name: freeName(copied.name, file) }
  return { ...file, regimens: file.regimens.toSpliced(index + 1, 0, copy) }
}

/** The file with one more regimen: a copy of the last. */
export function addRegimen(file: StudyFile): StudyFile {
  return copyRegimen(file, file.regimens.length - 1)
}

/**
 * The file without a regimen. Throws `RangeError` for the only one, and for one under which levels were measured: these
 * would be lost with it.
 */
export function removeRegimen(file: StudyFile, index: number): StudyFile {
  const { name } = regimenOf(file, index)
  if (file.regimens.length === 1) throw new RangeError('a study has at least one regimen')
  if (isMeasured(file, name)) throw new RangeError(`levels were measured under "${name}"`)
  return { ...file, regimens: file.regimens.toSpliced(index, 1) }
}

/** The file with a regimen under another name; measured levels follow it. */
export function renameRegimen(file: StudyFile, index: number, name: string): StudyFile {
  const before = regimenOf(file, index)
  const regimens = file.regimens.with(index, { ...before, name })
  if (!isMeasured(file, before.name)) return { ...file, regimens }
  const levels = file.levels?.map((level) => (level.regimen === before.name ? { ...level, regimen: name } : level))
  return { ...file, regimens, levels }
}

/** The file with a regimen at another position of the list. */
export function moveRegimen(file: StudyFile, from: number, to: number): StudyFile {
  const moved = regimenOf(file, from)
  regimenOf(file, to)
  return { ...file, regimens: file.regimens.toSpliced(from, 1).toSpliced(to, 0, moved) }
}

/** Whether levels were measured under the regimen of this name. */
export function isMeasured(file: StudyFile, name: string): boolean {
  return file.levels?.some((level) => level.regimen === name) === true
}

export function regimenOf(file: StudyFile, index: number): RegimenFile {
  const regimen = file.regimens[index]
  if (regimen === undefined) throw new RangeError(`there is no regimen at position ${index}`)
  return regimen
}

/** `X, copy`, then `X, copy 2` and so on; the copy of a copy is one more copy. */
function freeName(name: string, file: StudyFile): string {
  const taken = new Set(file.regimens.map((regimen) => regimen.name))
  const stem = name.replace(/, copy(?: \d+)?$/, '')
  for (let count = 1; ; count++) {
    const ending = count === 1 ? ', copy' : `, copy ${count}`
    const free = `${stem.slice(0, LONGEST_NAME - ending.length).trimEnd()}${ending}`
    if (!taken.has(free)) return free
  }
}
