import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { gzipSync } from 'node:zlib'
import { expect, test } from 'vitest'

const FOLDER = 'dist/app'
/** The whole of the first load, compressed [bytes]. */
const BUDGET = 120_000

/** index.html, its styles and scripts, and every script that these import statically; the worker is not among them. */
function firstLoad(): string[] {
  const page = readFileSync(join(FOLDER, 'index.html'), 'utf8')
  const waiting = [...page.matchAll(/(?:src|href)="\.?\/?([^"]+\.(?:js|css))"/g)].map((found) => found[1]!)
  const files = new Set(['index.html'])
  for (let next = waiting.pop(); next !== undefined; next = waiting.pop()) {
    if (files.has(next)) continue
    files.add(next)
    const text = readFileSync(join(FOLDER, next), 'utf8')
    if (!next.endsWith('.js')) continue
    for (const [, path] of text.matchAll(/(?:from|import)\s*["']\.\/([^"']+\.js)["']/g)) waiting.push(`assets/${path!}`)
  }
  return [...files]
}

test('the first load is small, and holds neither validation nor computation', () => {
  const files = firstLoad()
  expect(files.some((file) => file.endsWith('.js'))).toBe(true)
  expect(files.some((file) => file.endsWith('.css'))).toBe(true)
  const texts = files.map((file) => readFileSync(join(FOLDER, file), 'utf8'))
  const size = texts.reduce((sum, text) => sum + gzipSync(text).length, 0)
  console.info(`first load ${(size / 1000).toFixed(1)} kB compressed, of at most ${BUDGET / 1000}`)
  expect(size).toBeLessThan(BUDGET)
  // zod names its own kind of error, and every model its format.
  expect(texts.join('')).not.toContain('ZodError')
  expect(texts.join('')).not.toContain('phasewise-model')
})
