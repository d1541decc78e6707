import { convert, type Quantity } from '../../units/quantity'
import type { DoseFile, ExceptionFile } from '../file/doseSchema'
import type { StudyFile } from '../file/studySchema'
import { regimenOf } from './regimens'

const DAY: Quantity = { value: 24, unit: 'h' }

/** What became of a scheduled dose. */
export type Fate = 'given' | 'missed' | { readonly lateBy: Quantity; readonly shiftsLater?: boolean }

/**
 * The file with one more dose line in a regimen: the last once more, as a single dose one of its intervals later (a day
 * later where it does not repeat), without what happened to its doses and without its reason.
 */
export function addDose(file: StudyFile, regimen: number): StudyFile {
  const { doses } = regimenOf(file, regimen)
  const last = doses[doses.length - 1]
  if (last === undefined) throw new RangeError('a regimen has at least one dose line')
  const { every, count: _count, exceptions: _exceptions, reason: _reason, ...kept } = last
  return withDoses(file, regimen, [...doses, { ...kept, at: later(last.at, every ?? DAY) }])
}

/** The file without a dose line. Throws `RangeError` for the only one of its regimen. */
export function removeDose(file: StudyFile, regimen: number, line: number): StudyFile {
  const { doses } = regimenOf(file, regimen)
  lineOf(doses, line)
  if (doses.length === 1) throw new RangeError('a regimen has at least one dose line')
  return withDoses(file, regimen, doses.toSpliced(line, 1))
}

/**
 * The file with what became of one dose of a line, counted from 1. `given` takes back whatever was said of it; `missed`
 * takes the place of it, since a missed dose has no other departure; lateness stands beside a changed amount or length.
 */
export function markDose(file: StudyFile, regimen: number, line: number, number: number, fate: Fate): StudyFile {
  const { doses } = regimenOf(file, regimen)
  const dose = lineOf(doses, line)
  const before = dose.exceptions?.find((exception) => exception.number === number)
  const others = (dose.exceptions ?? []).filter((exception) => exception.number !== number)
  const said = [...others, ...departure(number, fate, before)].sort((a, b) => a.number - b.number)
  const { exceptions: _, ...kept } = dose
  return withDoses(file, regimen, doses.with(line, said.length === 0 ? kept : { ...kept, exceptions: said }))
}

function departure(number: number, fate: Fate, before: ExceptionFile | undefined): ExceptionFile[] {
  if (fate === 'given') return []
  if (fate === 'missed') return [{ number, missed: true }]
  const { missed: _missed, shiftsLater: _shifts, ...kept } = before ?? { number }
  const shifts = fate.shiftsLater === undefined ? {} : { shiftsLater: fate.shiftsLater }
  return [{ ...kept, number, lateBy: fate.lateBy, ...shifts }]
}

/** A time later by another, in the unit in which it was typed; twelve digits, so that 0.1 + 0.2 is 0.3. */
function later(at: Quantity, by: Quantity): Quantity {
  return { value: Number((at.value + convert('time', by, at.unit)).toPrecision(12)), unit: at.unit }
}

function lineOf(doses: readonly DoseFile[], line: number): DoseFile {
  const dose = doses[line]
  if (dose === undefined) throw new RangeError(`there is no dose line at position ${line}`)
  return dose
}

function withDoses(file: StudyFile, regimen: number, doses: DoseFile[]): StudyFile {
  return { ...file, regimens: file.regimens.with(regimen, { ...regimenOf(file, regimen), doses }) }
}
