const files = import.meta.glob<unknown>('../../models/drugs/*.json', { eager: true, import: 'default' })

/** The content of the shipped model file with this id, or undefined. The files are part of the built command. */
export function shippedModel(id: string): unknown {
  return files[`../../models/drugs/${id}.json`]
}
