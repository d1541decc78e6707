import type { GivenFile } from './studyDesk'

/** The worked studies that come with the program, each a file of its own that is fetched when it is opened. */
const FILES = import.meta.glob<string>('../../models/studies/*.json', { query: '?url', import: 'default', eager: true })

/** The study that is open at the start. */
const DEMONSTRATION = 'choosing-the-interval'

export interface ShippedStudy {
  readonly id: string
  readonly title: string
}

export const SHIPPED_STUDIES: readonly ShippedStudy[] = Object.keys(FILES)
  .map((path) => path.slice(path.lastIndexOf('/') + 1, -'.json'.length))
  .map((id) => ({ id, title: `${id.charAt(0).toUpperCase()}${id.slice(1).replaceAll('-', ' ')}` }))

export async function shippedStudy(id: string): Promise<GivenFile> {
  const address = FILES[`../../models/studies/${id}.json`]
  if (address === undefined) throw new RangeError(`no study named ${id} comes with the program`)
  return fetched(address, `${id}.json`)
}

export function demonstration(): Promise<GivenFile> {
  return shippedStudy(DEMONSTRATION)
}

/** The study that the command serves beside the page, where it was opened with one. */
export function openedStudy(): Promise<GivenFile> | undefined {
  return location.search === '?opened' ? fetched('opened-study.json', 'opened-study.json') : undefined
}

async function fetched(address: string, name: string): Promise<GivenFile> {
  const answer = await fetch(address)
  if (!answer.ok) throw new Error(`the study could not be read (status ${answer.status})`)
  return { name, content: await answer.blob() }
}
