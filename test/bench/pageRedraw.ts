import { readFileSync } from 'node:fs'
import { cpus } from 'node:os'
import { launchBrowser, openPage, serveApp } from '../browser/browser'

const EDITS = 20
/** The first edits meet code that the browser has not compiled yet. */
const WARM_UP = 5
/** A redraw that keeps pace with the screen [ms of main-thread script]. */
const TARGET = 16

const STUDY = 'models/studies/choosing-the-interval.json'

/**
 * The browser's own counters; of these, ScriptDuration leaves out what runs as the continuation of a promise. Hence
 * `sampled` beside it: script and garbage collection of the main thread by its profiler, at ten samples a millisecond.
 */
const COUNTERS = ['ScriptDuration', 'RecalcStyleDuration', 'LayoutDuration'] as const
type Name = (typeof COUNTERS)[number] | 'sampled'

/** What the profiler calls the time in which no script runs. */
const NO_SCRIPT = ['(idle)', '(program)', '(root)']

/**
 * Edit the demonstration study, three regimens, again and again, each time another dose, and print how long the main
 * thread works until the page shows it. The page is asked seldom, since asking is work, too.
 */
export async function pageRedraw(): Promise<void> {
  const browser = await launchBrowser()
  const served = await serveApp()
  try {
    const { page, context } = await openPage(browser, served.address)
    await page.waitForSelector('.desk .rows tbody td')
    const debug = await context.newCDPSession(page)
    await debug.send('Performance.enable')
    await debug.send('Profiler.enable')
    await debug.send('Profiler.setSamplingInterval', { interval: 100 })
    const metrics = async () => {
      const { metrics } = await debug.send('Performance.getMetrics')
      return (name: string) => 1000 * (metrics.find((metric) => metric.name === name)?.value ?? Number.NaN)
    }
    const figures = new Map<Name, number[]>([...COUNTERS, 'sampled' as const].map((name) => [name, []]))
    for (let edit = 0; edit < WARM_UP + EDITS; edit++) {
      const title = `edit ${edit}`
      const text = edited(title, 400 + 10 * edit)
      await debug.send('Profiler.start')
      const before = await metrics()
      await page.evaluate(drop, text)
      await settled(page, title)
      const after = await metrics()
      const { profile } = await debug.send('Profiler.stop')
      if (edit < WARM_UP) continue
      for (const name of COUNTERS) figures.get(name)?.push(after(name) - before(name))
      figures.get('sampled')?.push(sampledScript(profile))
    }
    print(figures, browser.version())
  } finally {
    await browser.close()
    await served.close()
  }
}

function edited(title: string, amount: number): string {
  const study = JSON.parse(readFileSync(STUDY, 'utf8'))
  study.title = title
  for (const regimen of study.regimens) regimen.doses[1].amount.value = amount
  return JSON.stringify(study)
}

/** In the page: the way of a file that is let go over it. */
function drop(text: string): void {
  const data = new DataTransfer()
  data.items.add(new File([text], 'edited.json', { type: 'application/json' }))
  document.querySelector('main')?.dispatchEvent(new DragEvent('drop', { bubbles: true, dataTransfer: data }))
}

/** Until the page's title says so, asked seldom: asking is a little script, too, and counted. */
async function settled(page: { title(): Promise<string> }, title: string): Promise<void> {
  for (let wait = 0; wait < 100; wait++) {
    await new Promise((done) => setTimeout(done, 250))
    if ((await page.title()).startsWith(title)) {
      // The rows of the table arrive after the page.
      await new Promise((done) => setTimeout(done, 250))
      return
    }
  }
  throw new Error(`the page never showed "${title}"`)
}

function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b)
  const middle = sorted.length / 2
  return (sorted[Math.floor(middle - 0.5)]! + sorted[Math.ceil(middle - 0.5)]!) / 2
}

function print(figures: ReadonlyMap<Name, readonly number[]>, browser: string): void {
  const line = (title: string, name: Name) => {
    const taken = figures.get(name) ?? []
    const of = (figure: number) => figure.toFixed(1).padStart(6)
    console.log(
      `  ${title.padEnd(26)} ${of(median(taken))} ms  (${of(Math.min(...taken))} to ${of(Math.max(...taken))})`
    )
  }
  console.log(`redraw after an edit, three regimens, median of ${EDITS} (Chromium ${browser}, ${cpus().length} cores)`)
  line('script, ScriptDuration', 'ScriptDuration')
  line('style', 'RecalcStyleDuration')
  line('layout', 'LayoutDuration')
  line('script, sampled', 'sampled')
  const script = Math.max(median(figures.get('ScriptDuration') ?? []), median(figures.get('sampled') ?? []))
  console.log(`  the larger of both is ${script < TARGET ? 'under' : 'NOT under'} ${TARGET} ms`)
}

interface Profile {
  readonly nodes: readonly { readonly id: number; readonly callFrame: { readonly functionName: string } }[]
  readonly samples?: readonly number[]
  readonly timeDeltas?: readonly number[]
}

/** Time that samples found in script [ms]. */
function sampledScript(profile: Profile): number {
  const idle = new Set(
    profile.nodes.filter((node) => NO_SCRIPT.includes(node.callFrame.functionName)).map(({ id }) => id)
  )
  let microseconds = 0
  profile.samples?.forEach((id, k) => {
    if (!idle.has(id)) microseconds += profile.timeDeltas?.[k] ?? 0
  })
  return microseconds / 1000
}
