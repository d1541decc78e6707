/** The worked studies that come with the program, each a file of its own that is fetched when it is opened. */
const FILES = import.meta.glob<string>('../../models/studies/*.json', { query: '?url', import: 'default', eager: true })

/** The study that is open at the start. */
export const DEMONSTRATION = 'choosing-the-interval'

export interface ShippedStudy {
  readonly id: string
  readonly title: string
}

export const SHIPPED_STUDIES: readonly ShippedStudy[] = Object.keys(FILES)
  .map((path) => path.slice(path.lastIndexOf('/') + 1, -'.json'.length))
  .map((id) => ({ id, title: `${id.charAt(0).toUpperCase()}${id.slice(1).replaceAll('-', ' ')}` }))

export async function shippedStudy(id: string): Promise<{ name: string; content: Blob }> {
  const address = FILES[`../../models/studies/${id}.json`]
  if (address === undefined) throw new RangeError(`no study named ${id} comes with the program`)
  const answer = await fetch(address)
  if (!answer.ok) throw new Error(`${id}.json could not be read (status ${answer.status})`)
  return { name: `${id}.json`, content: await answer.blob() }
}
