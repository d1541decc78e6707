const FILES = import.meta.glob<unknown>('../../../models/drugs/*.json', { eager: true, import: 'default' })

/** The content of the shipped model file with this id, or undefined. The files are part of the worker, not of the first load. */
export function shippedModel(id: string): unknown {
  return FILES[`../../../models/drugs/${id}.json`]
}
