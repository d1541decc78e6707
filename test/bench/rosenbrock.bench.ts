import { execFileSync } from 'node:child_process'
import { existsSync, mkdirSync, writeFileSync } from 'node:fs'
import { RODAS5P } from '../../src/numerics/rodas5p'
import { Integrator } from '../../src/pk/integrate'
import { buildPeer, pythonWithScipy } from './peers'
import { integratedEnds } from './rosenbrockModels'
import { Dosed, type DosedProblem, errorOf, SATURABLE, TARGET_MEDIATED } from './rosenbrockProblems'

/**
 * Time of one solution at equal achieved error: every method is run over a ladder of tolerances, the fastest that reaches the
 * error is kept, and the kept ones take turns; the least disturbed of the rounds counts. Processor time throughout,
 * which other work on the machine moves less than the clock on the wall.
 */
const ROUNDS = 7
const ERRORS = [1e-4, 1e-6, 1e-8]
const LADDER = Array.from({ length: 19 }, (_, k) => 10 ** (-3 - k / 2))
/** Time spent on one measurement. */
const SLICE = 10_000

interface Solution {
  /** Microseconds. */
  readonly time: number
  readonly ends: readonly number[]
}

interface Method {
  readonly name: string
  run(problem: DosedProblem, relative: number, repeats: number): Solution
}

function timed(repeats: number, solve: () => number[]): Solution {
  const start = process.cpuUsage()
  let ends: number[] = []
  for (let k = 0; k < repeats; k++) ends = solve()
  const { user, system } = process.cpuUsage(start)
  return { time: (user + system) / repeats, ends }
}

const ours: Method = {
  name: 'Rodas5P, JavaScript',
  run(problem, relative, repeats) {
    const dosed = new Dosed(problem, relative)
    return timed(repeats, () => dosed.solve())
  }
}

const engine: Method = {
  name: 'engine, with area and eliminated amount',
  run(problem, relative, repeats) {
    const integrator = new Integrator({ relative, floor: 1e-3 })
    return timed(repeats, () => integratedEnds(problem, integrator))
  }
}

function program(name: string, command: string, words: readonly string[] = []): Method {
  return {
    name,
    run(problem, relative, repeats) {
      const given = [...words, problem.name, String(relative), String(repeats)]
      const [time, ...ends] = execFileSync(command, given, { encoding: 'utf8' }).trim().split(/\s+/).map(Number)
      return { time, ends }
    }
  }
}

/** The methods that this machine has; a line for each that it has not. */
function methods(): Method[] {
  const found = [ours, engine]
  writeCoefficients()
  const c = buildPeer('rodas5p.c', 'rodas5p', [])
  if (c) found.push(program('the same in C', c))
  const libraries = ['cvode', 'nvecserial', 'sunmatrixdense', 'sunlinsoldense'].map((name) => `-lsundials_${name}`)
  const cvode = buildPeer('cvode_nonlinear.c', 'cvode_nonlinear', libraries)
  if (cvode) found.push(program('CVODE', cvode))
  const lsoda = lsodaKernel()
  if (lsoda) found.push(program('LSODA kernel', lsoda))
  const python = pythonWithScipy()
  if (python) found.push(program('SciPy LSODA', python, ['test/bench/peers/lsoda_scipy.py']))
  return found
}

/** ODEPACK's LSODA out of R's package deSolve, called from C. */
function lsodaKernel(): string | undefined {
  const library = '/usr/lib/R/site-library/deSolve/libs/deSolve.so'
  const r = '/usr/lib/R/lib'
  if (!existsSync(library)) {
    console.log('  (LSODA kernel skipped: no r-cran-desolve)')
    return undefined
  }
  return buildPeer('lsoda_nonlinear.c', 'lsoda_nonlinear', [library, `-L${r}`, '-lR', `-Wl,-rpath,${r}`])
}

/** The method's numbers as C has them, with gamma in C as in the program. */
function writeCoefficients(): void {
  const { gamma, A, C } = RODAS5P
  const lines = [`#define G ${gamma}`]
  for (const [i, row] of A.slice(0, 6).entries()) {
    for (const [j, entry] of row.entries()) lines.push(`#define A${i + 1}${j + 1} (${entry})`)
  }
  for (const [i, row] of C.entries()) {
    for (const [j, entry] of row.entries()) lines.push(`#define C${i + 1}${j + 1} (${entry * gamma})`)
  }
  mkdirSync('test/bench/peers/build', { recursive: true })
  writeFileSync('test/bench/peers/build/rodas5p.h', `${lines.join('\n')}\n`)
}

/** For each error the tolerance that reaches it in the shortest time. */
function fastest(method: Method, problem: DosedProblem, exact: readonly number[]): (number | undefined)[] {
  const tried = LADDER.flatMap((relative) => {
    const first = method.run(problem, relative, 1)
    const error = errorOf(problem, first.ends, exact)
    const { time } = method.run(problem, relative, repeatsFor(first.time))
    return [{ relative, error, time }]
  })
  return ERRORS.map((wanted) => {
    const good = tried.filter(({ error }) => error <= wanted)
    return good.length === 0 ? undefined : good.reduce((best, each) => (each.time < best.time ? each : best)).relative
  })
}

function repeatsFor(time: number): number {
  return Math.max(1, Math.min(500, Math.ceil(SLICE / time)))
}

function compare(problem: DosedProblem, all: readonly Method[]): void {
  console.log(`${problem.title}; microseconds a solution (ratio to Rodas5P, JavaScript)`)
  const exact = new Dosed(problem, 1e-13).solve()
  const chosen = all.map((method) => fastest(method, problem, exact))
  const times = all.map(() => ERRORS.map((): number[] => []))
  for (let round = 0; round < ROUNDS; round++) {
    for (const [e] of ERRORS.entries()) {
      all.forEach((method, m) => {
        const relative = chosen[m][e]
        if (relative === undefined) return
        const rough = times[m][e].at(-1) ?? method.run(problem, relative, 2).time
        times[m][e].push(method.run(problem, relative, repeatsFor(rough)).time)
      })
    }
  }
  console.log(`  ${'error'.padEnd(40)}${ERRORS.map((error) => String(error).padStart(18)).join('')}`)
  all.forEach((method, m) => {
    const cells = ERRORS.map((_, e) => {
      if (times[m][e].length === 0) return 'not reached'.padStart(18)
      const time = Math.min(...times[m][e])
      return `${time.toFixed(0)} (${(time / Math.min(...times[0][e])).toFixed(2)})`.padStart(18)
    })
    console.log(`  ${method.name.padEnd(40)}${cells.join('')}`)
  })
}

const all = methods()
for (const problem of [SATURABLE, TARGET_MEDIATED]) compare(problem, all)
