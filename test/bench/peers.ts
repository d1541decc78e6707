import { execFileSync, spawnSync } from 'node:child_process'
import { mkdirSync } from 'node:fs'
import { join } from 'node:path'

/** Where the peers' sources are, from the root of the project, and where they are built. */
const SOURCES = 'test/bench/peers'
const BUILT = 'test/bench/peers/build'

/** What a peer prints: a time or a rate, and the checksum of its results. */
export interface PeerResult {
  readonly figure: number
  readonly checksum: number
}

/** Build a peer in C; undefined, with a line that says so, where the compiler or a library is missing. */
export function buildPeer(source: string, name: string, flags: readonly string[]): string | undefined {
  mkdirSync(BUILT, { recursive: true })
  const program = join(BUILT, name)
  const words = ['-O3', '-march=native', join(SOURCES, source), '-o', program, ...flags, '-lm']
  const { status, error, stderr } = spawnSync('gcc', words, { encoding: 'utf8' })
  if (status === 0) return program
  const why = error ? 'no gcc' : (stderr.split('\n').find((line) => line.includes('error')) ?? 'gcc failed')
  console.log(`  (${name} skipped: ${why})`)
  return undefined
}

/** Run a peer that prints two numbers. */
export function runPeer(program: string, words: readonly string[]): PeerResult {
  const [figure, checksum] = execFileSync(program, words, { encoding: 'utf8' }).trim().split(/\s+/).map(Number)
  return { figure, checksum }
}

/** The Python that has SciPy; undefined, with a line that says so, where there is none. */
export function pythonWithScipy(): string | undefined {
  for (const python of ['/usr/bin/python3', 'python3']) {
    if (spawnSync(python, ['-c', 'import scipy.linalg']).status === 0) return python
  }
  console.log('  (SciPy skipped: no python3-scipy)')
  return undefined
}

export function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b)
  const middle = Math.floor(sorted.length / 2)
  return sorted.length % 2 === 1 ? sorted[middle] : (sorted[middle - 1] + sorted[middle]) / 2
}
