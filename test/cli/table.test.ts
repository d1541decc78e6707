import { mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import { phasewise } from './phasewise'

const STUDY = 'models/studies/choosing-the-interval.json'

let folder: string
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'phasewise-cli-'))
})
afterAll(() => rmSync(folder, { recursive: true, force: true }))

describe('phasewise table', () => {
  test('prints a header, CRLF after every row, and numbers that read back exactly', () => {
    const { status, out, error } = phasewise(['table', STUDY])
    expect(error).toBe('')
    expect(status).toBe(0)
    const lines = out.split('\r\n')
    expect(lines[0]).toBe(
      'regimen,time_h,row,concentration_mg_L,amount_depot_mg,amount_central_mg,amount_peripheral_mg,auc_mg_h_L,eliminated_mg'
    )
    expect(lines.at(-1)).toBe('')
    for (const line of lines.slice(1, -1)) {
      const cells = line.split(',')
      expect(cells).toHaveLength(9)
      for (const cell of [cells[1], ...cells.slice(3)]) expect(String(Number(cell))).toBe(cell)
    }
  })

  test('amounts and what was eliminated sum to what has entered, at every row', () => {
    const { rows } = JSON.parse(phasewise(['table', STUDY, '--json']).out) as {
      rows: [string, number, string, ...number[]][]
    }
    // 20 mg/kg x 58 kg = 1160 mg over 2 h, then nothing before 12 h.
    for (const [, time, , , depot, central, peripheral, , eliminated] of rows.filter(([, t]) => t >= 2 && t <= 12)) {
      const total = depot! + central! + peripheral! + eliminated!
      expect(Math.abs(total - 1160), `at ${time} h`).toBeLessThan(1160 * 1e-12)
    }
  })

  test('the JSON document holds the same columns and numbers as the CSV', () => {
    const [header, ...lines] = phasewise(['table', STUDY]).out.trimEnd().split('\r\n')
    const document = JSON.parse(phasewise(['table', STUDY, '--json']).out) as { columns: string[]; rows: unknown[][] }
    expect(document.columns.join(',')).toBe(header)
    expect(document.rows.map((row) => row.join(','))).toEqual(lines)
  })

  test('--out writes the CSV and its CSVW metadata with units, version, hash and the caution', () => {
    const file = join(folder, 'levels.csv')
    const { status, out } = phasewise(['table', STUDY, '--out', file])
    expect(status).toBe(0)
    expect(out).toBe('')
    expect(readFileSync(file, 'utf8')).toBe(phasewise(['table', STUDY]).out)
    const metadata = JSON.parse(readFileSync(`${file}-metadata.json`, 'utf8'))
    expect(Object.keys(metadata).slice(0, 2)).toEqual(['@context', 'rdfs:comment'])
    expect(metadata['@context']).toBe('http://www.w3.org/ns/csvw')
    expect(metadata['rdfs:comment'][0]).toContain('not a medical device')
    expect(metadata['schema:softwareVersion']).toBe(
      `Phasewise ${JSON.parse(readFileSync('package.json', 'utf8')).version}`
    )
    expect(metadata['schema:sha256']).toMatch(/^[0-9a-f]{64}$/)
    const header = readFileSync(file, 'utf8').split('\r\n')[0]
    expect(metadata.tableSchema.columns.map((column: { name: string }) => column.name).join(',')).toBe(header)
    for (const column of metadata.tableSchema.columns) {
      if (column.datatype === 'number') expect(column['schema:unitText']).toBeTruthy()
    }
  })

  test('a study on standard input gives the same table', () => {
    expect(phasewise(['table', '-'], readFileSync(STUDY)).out).toBe(phasewise(['table', STUDY]).out)
  })

  test('a place that cannot be written: exit status 1, one line, nothing left behind', () => {
    const { status, error } = phasewise(['table', STUDY, '--out', join(folder, 'no-such-folder', 'x.csv')])
    expect(status).toBe(1)
    expect(error.trimEnd().split('\n')).toHaveLength(1)
    expect(error).toContain('cannot be written')
    expect(readdirSync(folder).filter((name) => name.endsWith('.part'))).toEqual([])
  })
})
