/**
 * The whole check, as `npm test` runs it: types, lint with layers, build, then every test. Ends with one line,
 * `N passed, N failed`, in which each of the first three steps counts as one.
 */
import { spawnSync } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'

const STEPS = [
  { title: 'types', command: ['tsc', '-p', 'tsconfig.json'] },
  { title: 'types of the core, without DOM or Node', command: ['tsc', '-p', 'tsconfig.core.json'] },
  { title: 'lint and layers', command: ['biome', 'check', '--error-on-warnings'] },
  { title: 'unused files, exports and packages', command: ['knip'] },
  { title: 'build', command: ['npm', 'run', '--silent', 'build'] }
]

let passed = 0
let failed = 0
for (const step of STEPS) {
  const [program, ...args] = step.command
  const run = spawnSync(program, args, {
    env: { ...process.env, NODE_ENV: 'production', PATH: `node_modules/.bin:${process.env.PATH}` },
    encoding: 'utf8'
  })
  const ok = run.status === 0
  process.stdout.write(`${ok ? 'passed' : 'FAILED'}  ${step.title}\n`)
  if (!ok) process.stdout.write(`${run.stdout}${run.stderr}\n`)
  if (ok) passed++
  else failed++
}

const folder = mkdtempSync(join(tmpdir(), 'phasewise-test-'))
const report = join(folder, 'report.json')
const tests = spawnSync(
  'node_modules/.bin/vitest',
  ['run', '--reporter=default', '--reporter=json', `--outputFile.json=${report}`],
  {
    env: { ...process.env, PHASEWISE_BUILT: '1' },
    stdio: 'inherit'
  }
)
try {
  const counts = JSON.parse(readFileSync(report, 'utf8'))
  passed += counts.numPassedTests
  // A file that could not be loaded has no failed test of its own and must not count as nothing.
  failed += Math.max(counts.numFailedTests, tests.status === 0 ? 0 : 1)
} catch {
  failed++
}
rmSync(folder, { recursive: true, force: true })
process.stdout.write(`${passed} passed, ${failed} failed\n`)
process.exit(failed === 0 ? 0 : 1)
