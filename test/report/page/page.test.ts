import { readdirSync } from 'node:fs'
import { expect, test } from 'vitest'
import { tableRows } from '../../../src/report/concentrationTable'
import { plain } from '../../../src/report/page/prose'
import { TableRows } from '../../../src/report/page/tableView'
import { editedStudy, pageOfStudy, resultOf } from '../studyResult'

const STUDIES = readdirSync('models/studies').map((file) => file.replace(/\.json$/, ''))

/** Every text of a page, wherever it stands. */
function texts(value: unknown): string[] {
  if (typeof value === 'string') return [value]
  if (ArrayBuffer.isView(value) || typeof value !== 'object' || value === null) return []
  return Object.values(value).flatMap(texts)
}

test.each(STUDIES)('%s: nothing on the page is an empty value, a missing word or not a number', (id) => {
  const page = pageOfStudy(editedStudy(id))
  for (const text of texts(page)) expect(text).not.toMatch(/undefined|NaN|Infinity|\[object|null/)
  for (const { curves } of page.chart.sites) {
    for (const { values } of curves) expect(values.every((level) => Number.isFinite(level) && level >= 0)).toBe(true)
  }
  for (const grid of page.exposure) {
    for (const row of grid.rows) {
      expect(row.cells).toHaveLength(grid.columns.length)
      // A dash says why.
      for (const cell of row.cells) {
        if (cell.text === '–') expect(grid.notes.map(({ mark }) => mark)).toContain(cell.mark)
      }
    }
  }
})

test('a page survives the way from the worker to the screen unchanged', () => {
  const page = pageOfStudy(editedStudy('choosing-the-interval'))
  expect(structuredClone(page)).toEqual(page)
})

test('the demonstration in words: the patient, a regimen with its missed dose, the targets', () => {
  const { note } = pageOfStudy(editedStudy('choosing-the-interval'))
  expect(note.patient.map(plain).join(' ').replaceAll('\u00a0', ' ')).toBe(
    'A woman of 71 years, 58 kg and 162 cm, serum creatinine 1.6 mg/dL. From 72 h (day 4) on: serum creatinine 1.9 mg/dL.'
  )
  expect(plain(note.regimens[0]!.sentence).replace(/[\u00a0\u202f]/g, ' ')).toBe(
    '20 mg/kg (1 160 mg, at most 2 g) intravenously over 2 h at 0 h, then 500 mg intravenously over 1 h every 12 h from 12 h, to the end (dose 6 missed).'
  )
  expect(note.targets.map(plain).map((text) => text.replaceAll('\u00a0', ' '))).toEqual([
    'Level 10 mg/L to 50 mg/L for at least 90 % of the time, from the first dose to the end.',
    'AUC24 400 mg·h/L to 600 mg·h/L, at steady state (efficacy).',
    'Trough at most 20 mg/L, in every interval (safety).',
    'AUC24 at least 400 mg·h/L, on day 1 (efficacy).'
  ])
})

test('relations are equations, and the values are those of this patient', () => {
  const { model } = pageOfStudy(editedStudy('choosing-the-interval')).note
  const equations = model.equations.map(plain).map((text) => text.replaceAll('\u00a0', ' '))
  expect(equations).toContain('CL = 0.35 + 3.9 × (CLcr / 100 mL/min) L/h')
  expect(equations).toContain('V1 = 21 × (weight / 70 kg) L')
  const sentence = plain(model.sentence).replaceAll('\u00a0', ' ')
  // 0.35 + 3.9 x 29.5 / 100 and 21 x 58 / 70.
  expect(sentence).toContain('CL 1.50 L/h')
  expect(sentence).toContain('V1 17.4 L')
  expect(sentence).toContain('from 72 h CL 1.32 L/h')
})

test('a value typed in another unit than it is read in is shown as typed, with the converted value as its echo', () => {
  const page = pageOfStudy(
    editedStudy('choosing-the-interval', ({ patient }) => {
      patient.serumCreatinine = { value: 141.44, unit: 'umol/L' }
      patient.height = { value: 1.62, unit: 'm' }
    })
  )
  const echoes = page.note.patient[0]!.flatMap((part) =>
    typeof part === 'string' || part.edit === undefined ? [] : [[part.edit.at, part.text, part.edit.echo]]
  ).map((entry) => entry.map((text) => text?.replaceAll('\u00a0', ' ')))
  expect(echoes).toContainEqual(['patient.serumCreatinine', '141.44 µmol/L', '1.6 mg/dL'])
  expect(echoes).toContainEqual(['patient.height', '1.62 m', '162 cm'])
  expect(echoes).toContainEqual(['patient.weight', '58 kg', undefined])
})

test('the estimate that the model uses is marked, and only that one', () => {
  const { estimates } = pageOfStudy(editedStudy('choosing-the-interval')).note
  const clearance = estimates.groups.find(({ title }) => title.startsWith('Creatinine clearance'))
  expect(clearance?.rows.filter(({ usedBy }) => usedBy !== '').map(({ label, usedBy }) => [label, usedBy])).toEqual([
    ['Cockcroft-Gault, actual weight', 'CL']
  ])
  // (140 - 71) x 58 / (72 x 1.6) x 0.85 and the same with 1.9.
  expect(clearance?.rows[0]?.values.map(({ text }) => text)).toEqual(['29.5', '24.9'])
  expect(clearance?.title).toBe('Creatinine clearance, mL/min')
})

test('findings name the regimen that meets every target, and what the others miss', () => {
  const found = pageOfStudy(editedStudy('choosing-the-interval')).note.findings.map(plain)
  expect(found[0]).toMatch(/^B \(500 mg every 18 h\) meets every target: /)
  expect(found[1]).toMatch(/^A \(500 mg every 12 h\) misses 2 of 4: .*asked: at most 20/)
})

test('a value close to its limit is shown with digits enough to be on its own side of it', () => {
  const exact = resultOf(editedStudy('choosing-the-interval')).regimens[0]!.exposure.targets[2]!.value!
  const page = pageOfStudy(
    editedStudy('choosing-the-interval', ({ targets }) => {
      targets![2] = {
        kind: 'trough',
        when: 'every-interval',
        high: {
          value: Number(exact.toPrecision(3)) > exact ? exact * (1 - 1e-6) : Number(exact.toPrecision(3)),
          unit: 'mg/L'
        }
      }
    })
  )
  const cell = page.exposure[0]!.rows[2]!.cells[0]!
  expect(cell.met).toBe(false)
  expect(Number(cell.text)).toBeGreaterThan(
    Number(/at most ([\d.]+)/.exec(page.exposure[0]!.rows[2]!.head.replaceAll('\u00a0', ' '))![1])
  )
})

test('units of the screen change what is shown, in proportion, and nothing else', () => {
  const plainPage = pageOfStudy(editedStudy('choosing-the-interval'))
  const other = pageOfStudy(
    editedStudy('choosing-the-interval', (study) => {
      study.display = { time: 'd', concentration: 'ug/L', amount: 'g', unbound: true }
    })
  )
  const level = (page: typeof plainPage) => page.chart.sites[0]!.curves[0]!
  // The free fraction of PW-101 is 0.35.
  const at = 100
  expect(level(other).values[at]).toBeCloseTo(level(plainPage).values[at]! * 1000 * 0.35, 6)
  expect(level(other).times[at]).toBeCloseTo(level(plainPage).times[at]! / 24, 12)
  expect(other.chart.sites[0]!.title).toContain('Unbound concentration')
  expect(other.chart.sites[0]!.title).toContain('µg/L')
  // Whether a target is met does not depend on how it is shown.
  const met = (page: typeof plainPage) => page.exposure[0]!.rows.map((row) => row.cells.map((cell) => cell.met))
  expect(met(other)).toEqual(met(plainPage))
})

test.each(['choosing-the-interval', 'dialysis', 'loading-dose', 'fast-distribution'])(
  '%s: the table announces as many rows as it has, and gives them in any order',
  (id) => {
    const study = editedStudy(id)
    const result = resultOf(study)
    const page = pageOfStudy(study)
    const all = [...tableRows(result)]
    for (const [k, { rows }] of page.table.regimens.entries()) {
      const name = result.regimens[k]!.name
      expect(rows).toBe(all.filter((row) => row[0] === name).length)
      const table = new TableRows(result)
      const late = table.rows(k, rows - 3, 10)
      expect(late).toHaveLength(3)
      expect(table.rows(k, 0, rows).slice(-3)).toEqual(late)
      expect(table.rows(k, 0, 1)[0]).toHaveLength(page.table.columns.length)
    }
  }
)

test('a bolus into the observed compartment adds its row to the count', () => {
  const study = editedStudy('choosing-the-interval', (edited) => {
    for (const { doses } of edited.regimens) {
      for (const dose of doses) {
        delete dose.over
        dose.bolus = true
      }
    }
  })
  const result = resultOf(study)
  const counted = pageOfStudy(study).table.regimens.map(({ rows }) => rows)
  const all = [...tableRows(result)]
  expect(all.some((row) => row[2] === 'after dose')).toBe(true)
  expect(counted).toEqual(result.regimens.map(({ name }) => all.filter((row) => row[0] === name).length))
})

test('an effect site has its own curve, shown first where the window is its own', () => {
  const { chart } = pageOfStudy(editedStudy('fast-distribution'))
  expect(chart.sites.map(({ name }) => name)).toEqual(['whole blood', 'brain'])
  expect(chart.sites[chart.firstSite]?.name).toBe('brain')
  expect(chart.sites[1]?.window).toBeDefined()
  expect(chart.sites[0]?.window).toBeUndefined()
})

test('a row that is defined for no regimen leaves its table and is named with the reason', () => {
  const grids = pageOfStudy(editedStudy('fast-distribution')).exposure
  const steady = grids.find(({ title }) => title === 'At steady state')
  expect(steady?.rows).toEqual([])
  expect(steady?.notes.map(({ text }) => text).join(' ')).toMatch(/Not defined: .*peak.*\(/)
})

test('the twenty-seventh regimen has a letter of its own', async () => {
  const { regimenLabels } = await import('../../../src/report/page/regimenLabel')
  const labels = regimenLabels(Array.from({ length: 30 }, (_, k) => `regimen ${k}`))
  expect(new Set(labels.map(({ letter }) => letter)).size).toBe(30)
  expect(labels[26]?.letter).toBe('A2')
})
