import { existsSync, readFileSync } from 'node:fs'
import { describe, expect, test } from 'vitest'
import { phasewise } from './phasewise'

const README = readFileSync('README.md', 'utf8')
const STUDY = 'models/studies/choosing-the-interval.json'

/** Indented lines of the README between two of its lines. */
function printedBetween(from: string, to: string): string[] {
  const start = README.indexOf(from)
  const end = README.indexOf(to, start + from.length)
  if (start < 0 || end < 0) throw new Error(`the README lacks "${from}" or "${to}"`)
  return README.slice(start + from.length, end)
    .split('\n')
    .filter((line) => line.startsWith('    '))
    .map((line) => line.slice(4))
}

describe('what the README shows is what the command prints', () => {
  test('exposure', () => {
    const printed = phasewise(['exposure', STUDY]).out.split('\n')
    const shown = printedBetween('this is the one that meets its targets:', 'The concentration table in full precision')
    expect(shown.length).toBeGreaterThan(30)
    for (const line of shown) expect(printed).toContain(line)
  })

  test('table', () => {
    const printed = phasewise(['table', STUDY]).out.split('\r\n')
    const shown = printedBetween('(`levels.csv` begins)', 'and whether the arithmetic')
    expect(shown.length).toBeGreaterThan(3)
    expect(printed.slice(0, shown.length)).toEqual(shown)
  })

  test('check', () => {
    const printed = phasewise(['check', STUDY]).out.split('\n')
    const shown = printedBetween(`phasewise.mjs check ${STUDY}`, '## The commands')
    for (const line of shown) expect(printed).toContain(line)
  })

  test('every file that it links to is there', () => {
    for (const [, path] of README.matchAll(/\]\(([^)]+)\)/g)) expect(existsSync(path!), path).toBe(true)
  })
})
