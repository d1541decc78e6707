import { LinearOperators } from '../../src/numerics/linearOperators'
import { cohortChecksum } from './exponentialCohort'
import { mammillary } from './exponentialModels'
import { buildPeer, median, type PeerResult, pythonWithScipy, runPeer } from './peers'

/**
 * The exponential with sink, one area row and one input column against the same algorithm in C and against SciPy's expm,
 * and a cohort against the same algorithm in C and CVODE. Sides take turns within one run; medians of the rounds.
 */
const ROUNDS = 7
const SIZES = [3, 4, 5, 8, 12]

function exponential(n: number, calls: number): PeerResult {
  const area = { weights: Array.from({ length: n }, (_, i) => (i === 1 ? 1 / 20 : 0)), decay: 0 }
  const operators = new LinearOperators(mammillary(n, [1, 1, 1, 1]), [area], [1])
  const operator = operators.create()
  let checksum = 0
  const start = performance.now()
  for (let call = 0; call < calls; call++) {
    operators.into(0.5 + (call % 7), operator)
    checksum += operator.transition[n + 1] + operator.direct[0]
  }
  return { figure: ((performance.now() - start) * 1e6) / calls, checksum }
}

function rounds(run: () => PeerResult): PeerResult {
  const results = Array.from({ length: ROUNDS }, run)
  return { figure: median(results.map(({ figure }) => figure)), checksum: results[0].checksum }
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
    const calls = n <= 5 ? 70000 : 14000
    exponential(n, calls)
    const program = buildPeer('expm.c', `expm${n}`, [`-DN=${n}`])
    const ours: PeerResult[] = []
    const theirs: PeerResult[] = []
    for (let round = 0; round < ROUNDS; round++) {
      ours.push(exponential(n, calls))
      if (program) theirs.push(runPeer(program, ['exponential', String(calls)]))
    }
    const time = median(ours.map(({ figure }) => figure))
    let line = `  n = ${String(n).padEnd(2)}  ${microseconds(time)} us`
    if (theirs.length > 0) {
      agree(ours[0], theirs[0], 1e-12)
      const other = median(theirs.map(({ figure }) => figure))
      line += `   C ${microseconds(other)} us, JavaScript / C ${(time / other).toFixed(2)}`
    }
    if (python) {
      const scipy = runPeer(python, ['test/bench/peers/expm_scipy.py', String(n), '700'])
      agree({ figure: 0, checksum: exponential(n, 700).checksum }, scipy, 1e-9)
      line += `   SciPy ${microseconds(scipy.figure)} us, SciPy / JavaScript ${(scipy.figure / time).toFixed(0)}`
    }
    console.log(line)
  }
}

function microseconds(nanoseconds: number): string {
  return (nanoseconds / 1000).toFixed(2).padStart(7)
}

function compareCohorts(): void {
  const patients = 4000
  console.log(
    `Cohort of ${patients}: three compartments and depot, 28 doses, 337 times, one thread; median of ${ROUNDS} rounds`
  )
  const ours = rounds(() => {
    const start = performance.now()
    const checksum = cohortChecksum(patients)
    return { figure: (patients * 1000) / (performance.now() - start), checksum }
  })
  console.log(`  JavaScript ${thousands(ours.figure)} patients a second`)
  const c = buildPeer('expm.c', 'expm4-cohort', ['-DN=4', '-DF=1'])
  if (c) {
    const same = rounds(() => runPeer(c, ['cohort', String(patients)]))
    agree(ours, same, 1e-11)
    console.log(`  same in C  ${thousands(same.figure)}, JavaScript / C ${(ours.figure / same.figure).toFixed(2)}`)
  }
  const libraries = ['cvode', 'nvecserial', 'sunmatrixdense', 'sunlinsoldense'].map((name) => `-lsundials_${name}`)
  const cvode = buildPeer('cvode_cohort.c', 'cvode_cohort', libraries)
  if (cvode) {
    const few = 40
    const integrated = runPeer(cvode, [String(few)])
    agree({ figure: 0, checksum: cohortChecksum(few) }, integrated, 1e-3)
    console.log(
      `  CVODE      ${integrated.figure.toFixed(1)}, restarted at each dose, 1e-6; JavaScript / CVODE ${(ours.figure / integrated.figure).toFixed(0)}`
    )
  }
}

function thousands(value: number): string {
  return Math.round(value).toLocaleString('en')
}

compareExponentials()
compareCohorts()
