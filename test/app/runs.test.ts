import { expect, test, vi } from 'vitest'
import { Runs } from '../../src/app/runs'
import type { Outcome, PageWorker } from '../../src/app/worker/protocol'

/** A worker whose runs are answered by hand, each with an issue that names what was run. */
function workerByHand() {
  const begun: { text: string; answer: () => void; fail: () => void }[] = []
  let restarts = 0
  const open = async (content: Blob, doing?: (what: string) => void): Promise<Outcome> => {
    doing?.('computing "A"')
    const text = await content.text()
    return new Promise((answer, fail) => {
      begun.push({
        text,
        answer: () => answer({ ok: false, issues: [{ path: '', message: text }] }),
        fail: () => fail(new Error('out of memory'))
      })
    })
  }
  const client = { worker: { open } as PageWorker, restart: () => void restarts++ }
  return { client, begun, restarts: () => restarts }
}

const UNHEARD = { busy: () => undefined, doing: () => undefined, slow: () => undefined }

const said = (outcome: Outcome | undefined) => (outcome?.ok === false ? outcome.issues[0]?.message : undefined)
const moment = () => new Promise((done) => setTimeout(done, 5))

test('of the runs that wait only the last is begun, and those overtaken come to nothing', async () => {
  const { client, begun } = workerByHand()
  const busy: boolean[] = []
  const runs = new Runs(client, { ...UNHEARD, busy: (now) => busy.push(now) })
  const answers = ['a', 'b', 'c'].map((text) => runs.run(new Blob([text])))
  await moment()
  expect(begun.map(({ text }) => text)).toEqual(['a'])
  begun[0]?.answer()
  await moment()
  expect(begun.map(({ text }) => text)).toEqual(['a', 'c'])
  begun[1]?.answer()
  expect((await Promise.all(answers)).map(said)).toEqual([undefined, undefined, 'c'])
  expect(busy).toEqual([true, false])
})

test('a run that fails says so, and the next one is begun all the same', async () => {
  const { client, begun } = workerByHand()
  const runs = new Runs(client, UNHEARD)
  const first = runs.run(new Blob(['a']))
  await moment()
  begun[0]?.fail()
  expect(said(await first)).toContain('out of memory')
  const second = runs.run(new Blob(['b']))
  await moment()
  begun[1]?.answer()
  expect(said(await second)).toBe('b')
})

test('a run that goes on for too long can be stopped: it says what it was doing, and the next one is begun', async () => {
  vi.useFakeTimers()
  const { client, begun, restarts } = workerByHand()
  const slow: boolean[] = []
  const runs = new Runs(client, { ...UNHEARD, slow: (now) => slow.push(now) })
  const first = runs.run(new Blob(['a']))
  await vi.advanceTimersByTimeAsync(1999)
  expect(slow).toEqual([])
  await vi.advanceTimersByTimeAsync(2)
  expect(slow).toEqual([true])
  vi.useRealTimers()
  runs.stop(async () => undefined)
  expect(said(await first)).toBe('stopped while computing "A"')
  expect(restarts()).toBe(1)
  expect(slow).toEqual([true, false])
  const second = runs.run(new Blob(['b']))
  await moment()
  begun.at(-1)?.answer()
  expect(said(await second)).toBe('b')
})
