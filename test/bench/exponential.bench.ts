import { LinearOperators } from '../../src/numerics/linearOperators'
import { cohortChecksum } from './exponentialCohort'
import { mammillary } from './exponentialModels'
import { buildPeer, median, type PeerResult, pythonWithScipy, runPeer } from './peers'

/**
 * The exponential with sink, one area row and one input column against the same algorithm in C and against SciPy's expm,
 * and a cohort against the same algorithm in C and CVODE. Sides take turns within one run; medians of the rounds, and the
 * ratio of the best rounds, which says more on a machine that others use too.
 */
const ROUNDS = 25
/** Short slices, a few milliseconds, of which on a busy machine some run undisturbed; whole weeks of durations. */
const CALLS = 3500
const CALLS_OF_LARGE = 700
const WARM_UP = 60
const SIZES = [3, 4, 5, 8, 12]

/** Operators of n compartments, made once: a cohort keeps them, too. Runs them over and over and times that. */
function exponential(n: number): (calls: number) => PeerResult {
  const area = { weights: Array.from({ length: n }, (_, i) => (i === 1 ? 1 / 20 : 0)), decay: 0 }
  const operators = new LinearOperators(mammillary(n, [1, 1, 1, 1]), [area], [1])
  const operator = operators.create()
  return (calls) => {
    let checksum = 0
    const start = performance.now()
    for (let call = 0; call < calls; call++) {
      operators.into(0.5 + (call % 7), operator)
      checksum += operator.transition[n + 1] + operator.direct[0]
    }
    return { figure: ((performance.now() - start) * 1e6) / calls, checksum }
  }
}

/** Refuse to compare times of things that do not compute the same. */
function agree(a: PeerResult, b: PeerResult, relative: number): void {
  if (!(Math.abs(a.checksum - b.checksum) <= relative * Math.abs(a.checksum))) {
    throw new Error(`results differ: ${a.checksum} and ${b.checksum}`)
  }
}

function compareExponentials(): void {
  console.log(`Exponential with sink, area row and input column; median of ${ROUNDS} rounds`)
  const python = pythonWithScipy()
  for (const n of SIZES) {
    const calls = n <= 5 ? CALLS : CALLS_OF_LARGE
    const run = exponential(n)
    run(WARM_UP * calls)
    const program = buildPeer('expm.c', `expm${n}`, [`-DN=${n}`])
    const ours: PeerResult[] = []
    const theirs: PeerResult[] = []
    for (let round = 0; round < ROUNDS; round++) {
      ours.push(run(calls))
      if (program) theirs.push(runPeer(program, ['exponential', String(calls)]))
    }
    const time = median(ours.map(({ figure }) => figure))
    let line = `  n = ${String(n).padEnd(2)}  ${microseconds(time)} us`
    if (theirs.length > 0) {
      agree(ours[0], theirs[0], 1e-12)
      const other = median(theirs.map(({ figure }) => figure))
      const best = least(ours) / least(theirs)
      line += `   C ${microseconds(other)} us, JavaScript / C ${(time / other).toFixed(2)} (best ${best.toFixed(2)})`
    }
    if (python) {
      const scipy = runPeer(python, ['test/bench/peers/expm_scipy.py', String(n), '700'])
      agree({ figure: 0, checksum: run(700).checksum }, scipy, 1e-9)
      line += `   SciPy ${microseconds(scipy.figure)} us, SciPy / JavaScript ${(scipy.figure / time).toFixed(0)}`
    }
    console.log(line)
  }
}

function least(results: readonly PeerResult[]): number {
  return Math.min(...results.map(({ figure }) => figure))
}

function microseconds(nanoseconds: number): string {
  return (nanoseconds / 1000).toFixed(2).padStart(7)
}

function compareCohorts(): void {
  const patients = 4000
  const few = 10
  console.log(
    `Cohort of ${patients}: three compartments and depot, 28 doses, 337 times, one thread; median of ${ROUNDS} rounds`
  )
  const c = buildPeer('expm.c', 'expm4-cohort', ['-DN=4', '-DF=1'])
  const libraries = ['cvode', 'nvecserial', 'sunmatrixdense', 'sunlinsoldense'].map((name) => `-lsundials_${name}`)
  const cvode = buildPeer('cvode_cohort.c', 'cvode_cohort', libraries)
  cohort(patients)
  const ours: PeerResult[] = []
  const inC: PeerResult[] = []
  const integrated: PeerResult[] = []
  for (let round = 0; round < ROUNDS; round++) {
    ours.push(cohort(patients))
    if (c) inC.push(runPeer(c, ['cohort', String(patients)]))
    if (cvode) integrated.push(runPeer(cvode, [String(few)]))
  }
  const rate = median(ours.map(({ figure }) => figure))
  console.log(`  JavaScript ${thousands(rate)} patients a second`)
  if (c) {
    agree(ours[0], inC[0], 1e-11)
    console.log(
      `  same in C  ${thousands(median(inC.map(({ figure }) => figure)))}, JavaScript / C ${ratio(ours, inC, 2)}`
    )
  }
  if (cvode) {
    agree(cohort(few), integrated[0], 1e-3)
    const other = median(integrated.map(({ figure }) => figure))
    const line = `restarted at each dose, relative tolerance 1e-6; JavaScript / CVODE ${ratio(ours, integrated, 0)}`
    console.log(`  CVODE      ${other.toFixed(1)}, ${line}`)
  }
}

function cohort(patients: number): PeerResult {
  const start = performance.now()
  const checksum = cohortChecksum(patients)
  return { figure: (patients * 1000) / (performance.now() - start), checksum }
}

/** Of rates: by the medians, and by the best rounds. */
function ratio(a: readonly PeerResult[], b: readonly PeerResult[], digits: number): string {
  const rates = (results: readonly PeerResult[]) => results.map(({ figure }) => figure)
  const best = Math.max(...rates(a)) / Math.max(...rates(b))
  return `${(median(rates(a)) / median(rates(b))).toFixed(digits)} (best ${best.toFixed(digits)})`
}

function thousands(value: number): string {
  return Math.round(value).toLocaleString('en')
}

compareExponentials()
compareCohorts()
