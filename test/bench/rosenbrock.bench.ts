import { execFileSync } from 'node:child_process'
import { existsSync, mkdirSync, writeFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { RODAS5P } from '../../src/numerics/rodas5p'
import { Integrator } from '../../src/pk/integrate'
import { buildPeer, pythonWithScipy } from './peers'
import { integratedEnds } from './rosenbrockModels'
import { Dosed, type DosedProblem, errorOf, SATURABLE, TARGET_MEDIATED } from './rosenbrockProblems'

/**
 * Time of one solution at equal achieved error: every method is run over a ladder of tolerances, the fastest that reaches the
 * error is kept, and the kept ones take turns; the least disturbed of the rounds counts. Processor time throughout,
 * which other work on the machine moves less than the clock on the wall. Every method has a process of its own, ours
 * too: it is warmed up first, as a worker is.
 */
const ROUNDS = 5
const ERRORS = [1e-4, 1e-6, 1e-8]
const LADDER = Array.from({ length: 19 }, (_, k) => 10 ** (-3 - k / 2))
/** Microseconds: of one measurement, and of warming up. */
const SLICE = 15_000
const WARMING = 200_000

interface Method {
  readonly name: string
  readonly command: string
  readonly words: readonly string[]
}

interface Solution {
  /** Microseconds. */
  readonly time: number
  readonly ends: readonly number[]
}

function run({ command, words }: Method, problem: DosedProblem, relative: number, repeats: number): Solution {
  const given = [...words, problem.name, String(relative), String(repeats)]
  const [time, ...ends] = execFileSync(command, given, { encoding: 'utf8' }).trim().split(/\s+/).map(Number)
  return { time, ends }
}

/** What a process of ours does: as the peers, print microseconds a solution and what is compared. */
function solveHere(kind: string, name: string, relative: number, repeats: number): void {
  const problem = name === SATURABLE.name ? SATURABLE : TARGET_MEDIATED
  const solve = kind === 'engine' ? engine(problem, relative) : bare(problem, relative)
  const spent = (since: NodeJS.CpuUsage): number => {
    const { user, system } = process.cpuUsage(since)
    return user + system
  }
  const begun = process.cpuUsage()
  while (spent(begun) < WARMING) solve()
  const start = process.cpuUsage()
  let ends: number[] = []
  for (let k = 0; k < repeats; k++) ends = solve()
  console.log([spent(start) / repeats, ...ends].join(' '))
}

function bare(problem: DosedProblem, relative: number): () => number[] {
  const dosed = new Dosed(problem, relative)
  return () => dosed.solve()
}

function engine(problem: DosedProblem, relative: number): () => number[] {
  const integrator = new Integrator({ relative, floor: 1e-3 })
  return () => integratedEnds(problem, integrator)
}

/** The methods that this machine has; a line for each that it has not. */
function methods(): Method[] {
  const self = fileURLToPath(import.meta.url)
  const found: Method[] = [
    { name: 'Rodas5P, JavaScript', command: process.execPath, words: [self, 'solve', 'bare'] },
    { name: 'engine, with area and eliminated amount', command: process.execPath, words: [self, 'solve', 'engine'] }
  ]
  const add = (name: string, command: string | undefined, words: readonly string[] = []): void => {
    if (command) found.push({ name, command, words })
  }
  writeCoefficients()
  add('the same in C', buildPeer('rodas5p.c', 'rodas5p', []))
  const libraries = ['cvode', 'nvecserial', 'sunmatrixdense', 'sunlinsoldense'].map((name) => `-lsundials_${name}`)
  add('CVODE', buildPeer('cvode_nonlinear.c', 'cvode_nonlinear', libraries))
  add('LSODA kernel', lsodaKernel())
  add('SciPy LSODA', pythonWithScipy(), ['test/bench/peers/lsoda_scipy.py'])
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
  const repeats = method.name.startsWith('SciPy') ? 1 : 10
  const tried = LADDER.map((relative) => {
    const { time, ends } = run(method, problem, relative, repeats)
    return { relative, time, error: errorOf(problem, ends, exact) }
  })
  return ERRORS.map((wanted) => {
    const good = tried.filter(({ error }) => error <= wanted)
    return good.length === 0 ? undefined : good.reduce((best, each) => (each.time < best.time ? each : best)).relative
  })
}

function compare(problem: DosedProblem, all: readonly Method[]): void {
  console.log(`${problem.title}; microseconds a solution (ratio to Rodas5P, JavaScript)`)
  const exact = new Dosed(problem, 1e-13).solve()
  const chosen = all.map((method) => fastest(method, problem, exact))
  const times = all.map(() => ERRORS.map(() => Number.POSITIVE_INFINITY))
  for (let round = 0; round < ROUNDS; round++) {
    for (const e of ERRORS.keys()) {
      for (const [m, method] of all.entries()) {
        const relative = chosen[m][e]
        if (relative === undefined) continue
        const repeats = Math.max(1, Math.min(500, Math.ceil(SLICE / times[m][e])))
        times[m][e] = Math.min(times[m][e], run(method, problem, relative, repeats).time)
      }
    }
  }
  console.log(`  ${'error'.padEnd(40)}${ERRORS.map((error) => String(error).padStart(18)).join('')}`)
  for (const [m, method] of all.entries()) {
    const cells = times[m].map((time, e) =>
      (time < Number.POSITIVE_INFINITY
        ? `${time.toFixed(0)} (${(time / times[0][e]).toFixed(2)})`
        : 'not reached'
      ).padStart(18)
    )
    console.log(`  ${method.name.padEnd(40)}${cells.join('')}`)
  }
}

const [, , verb, kind, name, relative, repeats] = process.argv
if (verb === 'solve') solveHere(kind, name, Number(relative), Number(repeats))
else {
  const all = methods()
  for (const problem of [SATURABLE, TARGET_MEDIATED]) compare(problem, all)
}
