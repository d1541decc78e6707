import { spawn } from 'node:child_process'
import { createReadStream, existsSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, expect, test } from 'vitest'

let folder: string
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'phasewise-long-'))
})
afterAll(() => rmSync(folder, { recursive: true, force: true }))

/** Run the built command and read, while it runs, the most memory that it ever held [bytes]. */
function peakMemory(args: readonly string[]): Promise<{ readonly status: number | null; readonly bytes: number }> {
  return new Promise((done) => {
    const child = spawn(process.execPath, ['dist/cli/phasewise.mjs', ...args], { stdio: 'ignore' })
    let bytes = 0
    const look = setInterval(() => {
      const status = `/proc/${child.pid}/status`
      if (!existsSync(status)) return
      const held = /VmHWM:\s+(\d+) kB/.exec(readFileSync(status, 'utf8'))
      if (held !== null) bytes = Math.max(bytes, Number(held[1]) * 1024)
    }, 20)
    child.on('exit', (status) => {
      clearInterval(look)
      done({ status, bytes })
    })
  })
}

async function countLines(path: string): Promise<number> {
  let lines = 0
  for await (const chunk of createReadStream(path)) for (const byte of chunk as Buffer) if (byte === 10) lines++
  return lines
}

// The peak is read from /proc, which only Linux has.
test.runIf(process.platform === 'linux')('a table of a million rows is written within 300 MB', async () => {
  const study = JSON.parse(readFileSync('models/studies/choosing-the-interval.json', 'utf8'))
  study.regimens = study.regimens.slice(0, 1)
  study.sampling.every = { value: 0.6, unit: 's' }
  const path = join(folder, 'million.json')
  const out = join(folder, 'million.csv')
  writeFileSync(path, JSON.stringify(study))
  const { status, bytes } = await peakMemory(['table', path, '--out', out])
  expect(status).toBe(0)
  expect(await countLines(out)).toBeGreaterThan(1_000_000)
  expect(bytes).toBeGreaterThan(0)
  expect(bytes).toBeLessThan(300e6)
})
