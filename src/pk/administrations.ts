import type { Hours } from '../units/canonical'
import { multipleOf } from '../units/spacing'
import type { Administration, Dose } from './dose'
import type { Issue } from './issue'
import type { DoseLine, Exception, Prescription } from './prescription'
import { type Giving, plain, reckonGiving } from './reckoning'
import type { Route, Stretch, Subject } from './subject'
import { isBefore, sameTime } from './times'

/** More scheduled doses than this are refused before they are written out. */
export const MOST_DOSES = 100_000

export interface AdministrationsRequest {
  readonly prescription: Prescription
  readonly stretches: readonly Stretch[]
  /** Doses at or after it are not given. */
  readonly until: Hours
  /** Lines that go on to a later time of their own; all others end at `until`. */
  readonly untilOfLine?: (line: number) => Hours
  /** Where the regimen stands in the file, for issues: `regimens[0]`. */
  readonly path: string
}

export interface WrittenOut {
  /** Ascending by time; those of one time in the order of the lines. Missed doses are there, marked. */
  readonly administrations: readonly Administration[]
  readonly issues: readonly Issue[]
  /** What a reader must know: doses not given because they come too late, amounts capped. */
  readonly notes: readonly string[]
}

/**
 * A prescription written out for one individual: every giving with the inputs that it becomes, lag, product and
 * bioavailability applied as at the dose's actual time (after a change of the person at that very time).
 */
export function administrations(request: AdministrationsRequest): WrittenOut {
  const { prescription, path } = request
  const out: MutableWrittenOut = { administrations: [], issues: [], notes: [] }
  const untilOf = request.untilOfLine ?? (() => request.until)
  const scheduled = prescription.lines.reduce((sum, line, i) => sum + scheduledCount(line, untilOf(i)), 0)
  if (scheduled > MOST_DOSES) {
    const message = `${scheduled} doses are scheduled; at most ${MOST_DOSES} can be written out`
    return { ...out, issues: [{ path: `${path}.doses`, message }] }
  }
  prescription.lines.forEach((line, index) => {
    writeLine(
      { line, index, until: untilOf(index), path: `${path}.doses[${index}]`, stretches: request.stretches },
      out
    )
  })
  out.administrations.sort((a, b) => a.at - b.at)
  return { ...out, issues: withoutRepeats(out.issues) }
}

/** Issues without those that say the same of the same place again. */
export function withoutRepeats(issues: readonly Issue[]): Issue[] {
  return [...new Map(issues.map((issue) => [`${issue.path}: ${issue.message}`, issue])).values()]
}

/** The person in force at a time: of the last stretch that has begun. */
export function subjectAt(stretches: readonly Stretch[], at: Hours): Subject {
  let subject = stretches.at(0)?.subject
  for (const stretch of stretches) if (!isBefore(at, stretch.from)) subject = stretch.subject
  if (subject === undefined) throw new RangeError('a person has at least one stretch')
  return subject
}

/** One giving on a route as the inputs that it becomes, of an amount of the model's moiety. */
export function inputsOf(route: Route, at: Hours, duration: Hours, amount: number): Dose[] {
  return route.parts.map((part) => {
    const start = at + (route.lag + part.lag)
    const entering = amount * (route.bioavailability * part.fraction)
    const length = part.over ?? duration
    return length > 0
      ? { kind: 'infusion', start, into: part.into, amount: entering, duration: length }
      : { kind: 'bolus', start, into: part.into, amount: entering }
  })
}

/** Time of the line's scheduled dose `number` (from 1), before exceptions. */
export function scheduledTime(line: DoseLine, number: number): Hours {
  return number === 1 || line.every === undefined ? line.at : line.at + multipleOf(line.every, number - 1)
}

interface MutableWrittenOut {
  readonly administrations: Administration[]
  readonly issues: Issue[]
  readonly notes: string[]
}

interface LineRequest {
  readonly line: DoseLine
  readonly index: number
  readonly until: Hours
  readonly path: string
  readonly stretches: readonly Stretch[]
}

/** Doses of the line that are scheduled before `until`; infinite for a spacing that never gets there. */
function scheduledCount(line: DoseLine, until: Hours): number {
  if (line.every === undefined) return 1
  const spacing = multipleOf(line.every, 1)
  if (!(spacing > 0)) throw new RangeError(`repeats must be more than 0 h apart, got ${spacing} h`)
  return Math.min(line.count ?? Number.POSITIVE_INFINITY, Math.max(0, Math.ceil((until - line.at) / spacing)))
}

interface PlacedException {
  readonly exception: Exception
  readonly path: string
}

/** The doses of one line in turn; then exceptions that bring forward a dose scheduled too late. */
function writeLine(request: LineRequest, out: MutableWrittenOut): void {
  const { line, until, path } = request
  const exceptions = exceptionsByNumber(line, path, out.issues)
  const last = line.every === undefined ? 1 : (line.count ?? Number.POSITIVE_INFINITY)
  let shift = 0
  let inTime = 0
  let late = 0
  const write = (number: number): boolean => {
    const placed = exceptions.get(number)
    const scheduled = scheduledTime(line, number) + shift
    const at = actualTime(scheduled, placed, out.issues)
    if (placed?.exception.shiftsLater === true) shift += placed.exception.lateBy ?? 0
    if (!isBefore(at, until)) return false
    inTime += 1
    writeDose(request, { number, at, scheduled }, placed, out)
    return true
  }
  let number = 1
  for (; number <= last && isBefore(scheduledTime(line, number) + shift, until); number++) if (!write(number)) late += 1
  const scheduledInTime = number - 1
  for (const key of [...exceptions.keys()].filter((n) => n >= number).sort((a, b) => a - b)) {
    // A counted line has its later doses; one that repeats until the end has none, unless this one comes early.
    if (key > last || (!write(key) && line.count === undefined && line.every !== undefined)) {
      const doses = Number.isFinite(last) ? last : scheduledInTime
      const message = `there is no dose ${key}: the line has ${doses === 1 ? 'one dose' : `${doses} doses`}`
      out.issues.push({ path: `${exceptions.get(key)?.path ?? path}.number`, message })
    }
  }
  const notGiven = Number.isFinite(last) ? last - inTime : late
  if (notGiven > 0) {
    const which = Number.isFinite(last) ? `${notGiven} of ${last}` : String(notGiven)
    const [doses, are] = notGiven === 1 ? ['dose', 'is'] : ['doses', 'are']
    out.notes.push(
      `${nameOf(request)}: ${which} ${doses} would come at or after ${plain(until)} h and ${are} not given`
    )
  }
}

function exceptionsByNumber(line: DoseLine, path: string, issues: Issue[]): Map<number, PlacedException> {
  const byNumber = new Map<number, PlacedException>()
  line.exceptions.forEach((exception, i) => {
    const placed = { exception, path: `${path}.exceptions[${i}]` }
    const { number, missed, ...rest } = exception
    if (byNumber.has(number)) {
      issues.push({ path: `${placed.path}.number`, message: `dose ${number} has an exception already` })
      return
    }
    if (missed === true && Object.values(rest).some((value) => value !== undefined && value !== false)) {
      issues.push({ path: `${placed.path}.missed`, message: 'a missed dose has no other departure' })
    }
    byNumber.set(number, placed)
  })
  return byNumber
}

/** When the dose was given; one brought to before 0 is an issue, and is taken at 0 so that writing goes on. */
function actualTime(scheduled: Hours, placed: PlacedException | undefined, issues: Issue[]): Hours {
  const lateBy = placed?.exception.lateBy ?? 0
  const at = scheduled + lateBy
  if (at >= 0) return at
  if (placed !== undefined && !sameTime(scheduled, -lateBy)) {
    issues.push({
      path: `${placed.path}.lateBy`,
      message: `the dose would be given at ${plain(at)} h; no time is before 0 h`
    })
  }
  return 0
}

interface Timing {
  readonly number: number
  readonly at: Hours
  readonly scheduled: Hours
}

function writeDose(
  request: LineRequest,
  timing: Timing,
  placed: PlacedException | undefined,
  out: MutableWrittenOut
): void {
  const { line, path } = request
  const subject = subjectAt(request.stretches, timing.at)
  const route = subject.routes.find((candidate) => candidate.name === line.route)
  if (route === undefined) {
    out.issues.push({ path: `${path}.route`, message: `there is no route "${line.route}" at ${plain(timing.at)} h` })
    return
  }
  const giving = reckonGiving(line, placed?.exception, subject)
  if ('message' in giving) {
    const ofException = placed !== undefined && placed.exception[giving.key as keyof Exception] !== undefined
    out.issues.push({ path: `${ofException ? placed.path : path}.${giving.key}`, message: giving.message })
    return
  }
  const releasing = route.parts.find((part) => part.over !== undefined)
  if (giving.duration > 0 && releasing !== undefined) {
    const message = `"${route.name}" releases its dose over ${plain(releasing.over ?? 0)} h by itself; a dose on it has no length of its own`
    out.issues.push({ path: `${path}.over`, message })
    return
  }
  const missed = placed?.exception.missed === true
  if (giving.uncapped !== undefined && !missed) {
    const capped = `${plain(giving.uncapped)} mg capped at ${plain(line.atMost ?? 0)} mg`
    out.notes.push(`${nameOf(request)}, dose ${timing.number}: ${capped}`)
  }
  const amount = missed ? 0 : giving.productAmount * line.moietyFraction
  const departure = departureOf(timing, giving, missed)
  out.administrations.push({
    line: request.index,
    number: timing.number,
    at: timing.at,
    duration: missed ? 0 : giving.duration,
    route: route.name,
    amount,
    productAmount: missed ? 0 : giving.productAmount,
    ...(departure !== undefined && { departure }),
    doses: missed ? [] : inputsOf(route, timing.at, giving.duration, amount),
    missed
  })
}

function departureOf(timing: Timing, giving: Giving, missed: boolean): string | undefined {
  if (missed) return `missed: ${plain(giving.productAmount)} mg at ${plain(timing.scheduled)} h`
  const moved = timing.at - timing.scheduled
  if (sameTime(timing.at, timing.scheduled)) return giving.departure
  const when = `${plain(Math.abs(moved))} h ${moved > 0 ? 'late' : 'early'}`
  return giving.departure === undefined ? when : `${when}; ${giving.departure}`
}

function nameOf(request: LineRequest): string {
  return `dose line ${request.index + 1} (${request.line.route})`
}
