import { readFileSync } from 'node:fs'
import { pageOf } from '../../src/report/page/pageOf'
import { readStudy } from '../../src/study/file/readStudy'
import { runStudy } from '../../src/study/run'

const models = new Map<string, unknown>()

/** The shipped models are part of the worker and are there from the start. */
function shippedModel(id: string): unknown {
  if (!models.has(id)) models.set(id, JSON.parse(readFileSync(`models/drugs/${id}.json`, 'utf8')))
  return models.get(id)
}

/** What the worker does for one redraw: the file read and checked, the study run, the page laid out. */
function redraw(text: string): void {
  const read = readStudy(text, shippedModel)
  if (!read.ok) throw new Error(JSON.stringify(read.issues))
  const outcome = runStudy(read.study)
  if (!outcome.ok) throw new Error(JSON.stringify(outcome.issues))
  pageOf(outcome.result, read.file)
}

function median(values: readonly number[]): number {
  return [...values].sort((a, b) => a - b)[values.length >> 1] ?? Number.NaN
}

const ROUNDS = 25

console.log(`Redraw in the worker: file read, study run, page laid out; three regimens, warm, median of ${ROUNDS}`)
for (const [name, days] of [
  ['choosing-the-interval', 7],
  ['stepped-up-too-far', 28],
  ['bound-by-its-target', 84]
] as const) {
  const study = JSON.parse(readFileSync(`models/studies/${name}.json`, 'utf8'))
  study.sampling.until = { value: days, unit: 'd' }
  const texts = Array.from({ length: ROUNDS + 30 }, (_, k) => {
    // Another weight each time, so that nothing computed before can serve again.
    study.patient.weight = { value: 60 + k / 100, unit: 'kg' }
    return JSON.stringify(study)
  })
  const times = texts.map((text) => {
    const start = performance.now()
    redraw(text)
    return performance.now() - start
  })
  const measured = times.slice(30)
  console.log(`  ${name}, ${days} d: ${median(measured).toFixed(1)} ms (best ${Math.min(...measured).toFixed(1)})`)
}
