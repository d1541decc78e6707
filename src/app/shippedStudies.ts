import type { StudyFile } from './studyDesk'

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

export async function shippedStudy(id: string): Promise<StudyFile> {
  const address = FILES[`../../models/studies/${id}.json`]
  if (address === undefined) throw new RangeError(`no study named ${id} comes with the program`)
  return fetched(address, `${id}.json`)
}

/** The study that the page was opened with: the one that the command serves beside it, else the demonstration. */
export async function firstStudy(): Promise<StudyFile> {
  return location.search === '?opened' ? fetched('opened-study.json', 'opened-study.json') : shippedStudy(DEMONSTRATION)
}

async function fetched(address: string, name: string): Promise<StudyFile> {
  const answer = await fetch(address)
  if (!answer.ok) throw new Error(`the study could not be read (status ${answer.status})`)
  return { name, content: await answer.blob() }
}
