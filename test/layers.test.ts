import { execFileSync, spawnSync } from 'node:child_process'
import { cpSync, mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { dirname, join, resolve } from 'node:path'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'

const ORDER = ['numerics', 'units', 'pk', 'patient', 'population', 'planner', 'study', 'report', 'app'] as const
const biome = resolve('node_modules/.bin/biome')

let folder: string
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'phasewise-layers-'))
  for (const name of ['biome.json', 'lint', '.gitignore']) cpSync(name, join(folder, name), { recursive: true })
  execFileSync('git', ['init', '--quiet'], { cwd: folder })
})
afterAll(() => rmSync(folder, { recursive: true, force: true }))

/** What the linter says of one file planted at `path`, by the project's own rules. */
function lintPlanted(path: string, source: string): { readonly ok: boolean; readonly text: string } {
  const file = join(folder, path)
  mkdirSync(dirname(file), { recursive: true })
  writeFileSync(file, source)
  const run = spawnSync(biome, ['lint', path], { cwd: folder, encoding: 'utf8' })
  rmSync(file)
  return { ok: run.status === 0, text: `${run.stdout}${run.stderr}` }
}

describe('imports run downwards only', () => {
  test.each(ORDER.slice(0, -1).map((name, position) => [name, ORDER[position + 1]!] as const))(
    '%s may not import from %s, which stands above or beside it',
    (below, above) => {
      const planted = lintPlanted(
        `src/${below}/planted.ts`,
        `import { thing } from '../${above}/thing'\n\nexport const x = thing\n`
      )
      expect(planted.ok).toBe(false)
      expect(planted.text).toContain(`src/${below} stands below`)
    }
  )

  test('an import from a folder below is let through', () => {
    const planted = lintPlanted(
      'src/pk/planted.ts',
      `import { thing } from '../numerics/thing'\n\nexport const x = thing\n`
    )
    expect(planted.text).not.toContain('stands below')
    expect(planted.ok).toBe(true)
  })

  test.each([
    ['src/study/planted.ts', 'zod'],
    ['src/report/planted.ts', 'node:fs'],
    ['src/report/planted.ts', 'solid-js'],
    ['src/pk/planted.ts', 'ml-matrix'],
    ['src/app/planted.ts', 'commander']
  ])('%s may not import %s', (path, name) => {
    expect(lintPlanted(path, `import { thing } from '${name}'\n\nexport const x = thing\n`).ok).toBe(false)
  })
})

describe('below report, no function that differs between JavaScript engines', () => {
  test.each(['Math.exp(1)', 'Math.log(2)', 'Math.pow(2, 3)', 'Math.random()', '2 ** 3'])(
    '%s is refused in pk',
    (code) => {
      expect(lintPlanted('src/pk/planted.ts', `export const x = ${code}\n`).ok).toBe(false)
    }
  )

  test.each(['Math.sqrt(2)', 'Math.abs(-1)', 'Math.max(1, 2)'])('%s is let through', (code) => {
    expect(lintPlanted('src/pk/planted.ts', `export const x = ${code}\n`).ok).toBe(true)
  })
})
