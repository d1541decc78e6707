import type { Tick } from './figureAxis'

/** Marks of a time axis: lines across the figure, and words under it. Times in the axis's own unit. */
export interface TimeMarks {
  readonly lines: readonly number[]
  readonly words: readonly Tick[]
}

const HOURS_A_DAY = 24

/**
 * Days where the axis spans two or more of them and there is room to number each at its middle; weeks beyond; round
 * numbers of the axis's own unit on a shorter one.
 */
export function timeMarks(axis: { until: number; unit: string; hoursPerUnit: number; width: number }): TimeMarks {
  const hours = axis.until * axis.hoursPerUnit
  const days = hours / HOURS_A_DAY
  if (days < 2) return roundMarks(axis)
  return days <= 60 && axis.width / days > 22 ? dayMarks(axis, days) : weekMarks(axis, days)
}

function dayMarks(axis: { hoursPerUnit: number; width: number }, days: number): TimeMarks {
  const roomy = axis.width / days > 44
  const unitsADay = HOURS_A_DAY / axis.hoursPerUnit
  const whole = Math.floor(days + 1e-9)
  const lines = Array.from({ length: whole + 1 }, (_, day) => day * unitsADay)
  const words: Tick[] = []
  for (let day = 1; day <= whole; day++) {
    words.push({ at: (day - 0.5) * unitsADay, label: roomy || day === 1 ? `day ${day}` : `${day}` })
  }
  return { lines, words }
}

function weekMarks(axis: { hoursPerUnit: number; width: number }, days: number): TimeMarks {
  const weeks = days / 7
  const every = Math.max(1, Math.ceil((weeks * 66) / axis.width))
  const unitsAWeek = (7 * HOURS_A_DAY) / axis.hoursPerUnit
  const lines: number[] = []
  const words: Tick[] = []
  for (let week = 0; week <= weeks + 1e-9; week += every) {
    lines.push(week * unitsAWeek)
    words.push({ at: week * unitsAWeek, label: `week ${week}` })
  }
  return { lines, words }
}

function roundMarks(axis: { until: number; unit: string; hoursPerUnit: number; width: number }): TimeMarks {
  const least = axis.until / Math.max(2, axis.width / 70)
  const steps = axis.unit === 'h' ? [0.25, 0.5, 1, 2, 3, 4, 6, 12, 24] : [1, 2, 5, 10, 15, 30, 60, 120, 240]
  const step = steps.find((candidate) => candidate >= least) ?? least
  const count = Math.floor(axis.until / step + 1e-9)
  const lines = Array.from({ length: count + 1 }, (_, k) => k * step)
  // The unit stands once, at the last mark.
  return { lines, words: lines.map((at, k) => ({ at, label: k === count ? `${at} ${axis.unit}` : `${at}` })) }
}
